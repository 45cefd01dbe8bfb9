import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { createContext, runInContext } from 'node:vm';
import { MU0 } from '@gapwright/fem-core';
import { build } from 'vite';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';

/**
 * A program of somebody else: the force between two wires in unbounded space, told to whoever asks for `pull`, and the size of
 * the mesh by another entry of the package.
 */
const PROGRAM = `
import { solveProbes } from '@gapwright/fem-core';
import { triangleCount } from '@gapwright/fem-core/mesh';
const air = { kind: 'linear', muR: 1 };
const wire = (name, x) => ({ name, shape: { kind: 'circle', centre: [x, 0], radius: 0.002 } });
const { answers, field } = solveProbes(
  { outline: { kind: 'circle', centre: [0, 0], radius: 0.03 }, open: true, background: 'air', regions: [wire('left', -0.01), wire('right', 0.01)] },
  { materials: { air, left: air, right: air }, current: { left: 10, right: 10 } },
  [{ kind: 'force', name: 'pull', on: ['left'] }],
  { accuracy: 1e-2 },
);
globalThis.pull = answers[0].fx;
globalThis.triangles = triangleCount(field.mesh);
`;
const EXPECTED = (MU0 * 100) / (2 * Math.PI * 0.02);

const dependent = fileURLToPath(new URL('../../../packages/cli/dist/.bundle-', import.meta.url));
let folder = '';
let bundle = '';
beforeAll(async () => {
  folder = mkdtempSync(dependent); // the bundler finds the library as in any package that depends on it
  writeFileSync(join(folder, 'entry.js'), PROGRAM);
  const result = await build({
    root: folder,
    configFile: false,
    logLevel: 'error',
    build: { write: false, lib: { entry: join(folder, 'entry.js'), formats: ['iife'], name: 'program' } },
  });
  const [{ output }] = [result].flat() as { output: { code: string }[] }[];
  bundle = output[0].code;
}, 120_000);
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe('bundled for a browser', () => {
  test('it runs where there is nothing but the language', () => {
    const bare = createContext({});
    runInContext(bundle, bare, { timeout: 60_000 });
    expect(Math.abs(runInContext('globalThis.pull', bare) / EXPECTED - 1)).toBeLessThan(1e-2);
    expect(runInContext('globalThis.triangles', bare)).toBeGreaterThan(100);
  });

  test('and without WebAssembly, by the plain twins, to the same answer', () => {
    const [plain, bare] = [createContext({}), createContext({})];
    runInContext('delete globalThis.WebAssembly', plain);
    for (const context of [plain, bare]) runInContext(bundle, context, { timeout: 60_000 });
    const [a, b] = [plain, bare].map((context): number => runInContext('globalThis.pull', context));
    expect(Math.abs(a / b - 1)).toBeLessThan(1e-9);
  });

  /** The answer where the host was changed before, and which of the kernels that are compiled are fused. */
  const pullOn = (change: string): { readonly pull: number; readonly fused: readonly boolean[] } => {
    const host = createContext({});
    // Operations of relaxed SIMD have numbers from 0xfd 0x80 0x02 on; only the fused kernels hold one.
    runInContext(
      `globalThis.fused = [];
      const { Module, validate } = WebAssembly;
      const isFused = (bytes) => bytes.some((b, i) => b === 0xfd && (bytes[i + 1] & 0x80) !== 0 && bytes[i + 2] === 2);
      WebAssembly.Module = function (bytes) { fused.push(isFused(bytes)); return new Module(bytes); };
      ${change}`,
      host,
    );
    runInContext(bundle, host, { timeout: 60_000 });
    return { pull: runInContext('globalThis.pull', host), fused: runInContext('globalThis.fused', host) };
  };

  test('where relaxed SIMD is unknown, all SIMD is, or compiling is forbidden, other kernels or the plain twins serve', () => {
    const all = pullOn('');
    const unfused = pullOn('WebAssembly.validate = (bytes) => !isFused(bytes) && validate(bytes);');
    const none = pullOn('WebAssembly.validate = () => false;');
    const forbidden = pullOn(`WebAssembly.Module = function () { throw new WebAssembly.CompileError('forbidden'); };`);
    expect(all.fused.filter((fused) => fused)).toHaveLength(1);
    expect(unfused.fused).toEqual(all.fused.map(() => false));
    expect(none.fused).toEqual([]);
    for (const { pull } of [all, unfused]) expect(Math.abs(pull / EXPECTED - 1)).toBeLessThan(1e-2);
    expect(Math.abs(all.pull / unfused.pull - 1)).toBeLessThan(1e-9);
    for (const { pull } of [none, forbidden]) expect(pull).toBe(unfused.pull); // the twins round alike
  });

  test('it asks for no file and no network', () => {
    expect(bundle).not.toMatch(/\bfetch\(|XMLHttpRequest|import\(|require\(/);
  });
});

const browser = ['chromium', 'chromium-browser', 'google-chrome'].find(
  (name) => spawnSync(name, ['--version']).status === 0,
);

/** What a page shows once it has said that it is done. */
function shownBy(html: string): string {
  const page = join(folder, 'page.html');
  writeFileSync(page, html);
  const { stdout } = spawnSync(
    browser ?? '',
    [
      '--headless',
      '--no-sandbox',
      '--disable-gpu',
      '--virtual-time-budget=60000',
      '--dump-dom',
      pathToFileURL(page).href,
    ],
    { encoding: 'utf8', timeout: 100_000 },
  );
  return /<output>([^<]*)<\/output>/.exec(stdout)?.[1] ?? stdout.slice(0, 500);
}

describe.runIf(browser !== undefined)('in a real browser', () => {
  test('on the page itself', () => {
    const shown = shownBy(
      `<output></output><script>${bundle}; document.querySelector('output').textContent = globalThis.pull;</script>`,
    );
    expect(Math.abs(Number(shown) / EXPECTED - 1)).toBeLessThan(1e-2);
  });

  test('in a worker', () => {
    const shown = shownBy(`<output></output><script>
      const text = ${JSON.stringify(`${bundle}; postMessage(globalThis.pull);`).replaceAll('</', '<\\/')};
      const worker = new Worker(URL.createObjectURL(new Blob([text])));
      worker.onmessage = ({ data }) => { document.querySelector('output').textContent = data; };
    </script>`);
    expect(Math.abs(Number(shown) / EXPECTED - 1)).toBeLessThan(1e-2);
  });
});
