// Compiles each kernel of this folder (AssemblyScript) and writes it as a module of base64 text that runs anywhere:
// wasm/NAME.ts -> src/kernels/NAME.wasm.ts, and for those named in FUSED a second time with fused products (relaxed SIMD),
// NAME-fused.wasm.ts. What is newer than its source is left alone.
import { readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import asc from 'assemblyscript/asc';

const here = new URL('.', import.meta.url);
const target = (name) => new URL(`../src/kernels/${name}.wasm.ts`, here);
const changedAt = (url) => statSync(url, { throwIfNoEntry: false })?.mtimeMs ?? 0;

/** Memory comes from the caller, who lays out all arrays; the kernels allocate nothing and know no objects. */
const FLAGS =
  '-O3 --noAssert --runtime stub --enable simd --importMemory --maximumMemory 65536 --initialMemory 1'.split(' ');

/** Where fused products gain much. */
const FUSED = ['cholesky'];
const RELAXED = ['--enable', 'relaxed-simd'];

for (const file of readdirSync(here).filter((name) => name.endsWith('.ts'))) {
  const name = file.slice(0, -3);
  await build(file, name, FLAGS);
  if (FUSED.includes(name)) await build(file, `${name}-fused`, [...FLAGS, ...RELAXED]);
}

async function build(file, name, flags) {
  const newest = Math.max(changedAt(new URL(file, here)), changedAt(new URL(import.meta.url)));
  if (changedAt(target(name)) > newest) return;
  let bytes;
  const { error, stderr } = await asc.main([file, ...flags, '--outFile', 'out.wasm'], {
    readFile: (path) => {
      try {
        return readFileSync(new URL(path, here), 'utf8');
      } catch {
        return null;
      }
    },
    writeFile: (_, data) => {
      bytes = data;
    },
    listFiles: () => [],
  });
  if (error !== null && error !== undefined) {
    process.stderr.write(stderr.toString());
    process.exit(1);
  }
  writeFileSync(
    target(name),
    `/** The kernels of wasm/${file}, compiled by wasm/build.js; base64. */\nexport const bytes =\n  '${Buffer.from(bytes).toString('base64')}';\n`,
  );
}
