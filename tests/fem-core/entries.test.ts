import { execFileSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, test } from 'vitest';

const home = new URL('../../packages/fem-core/', import.meta.url);
const { exports } = JSON.parse(readFileSync(new URL('package.json', home), 'utf8')) as {
  exports: Readonly<Record<string, { readonly types: string; readonly default: string }>>;
};
const subjects = readdirSync(new URL('src/entries/', home)).map((file) => file.replace(/\.ts$/, ''));

interface Entry {
  /** As others import it. */
  readonly module: string;
  /** Functions, classes and constants. */
  readonly values: readonly string[];
  readonly types: readonly string[];
}

/** What an entry gives on, by its text: it holds nothing but `export { ... } from` and `export type { ... } from`. */
function readEntry(path: string, module: string): Entry {
  const text = readFileSync(new URL(path, home), 'utf8');
  const [values, types]: [string[], string[]] = [[], []];
  for (const statement of ts.createSourceFile(path, text, ts.ScriptTarget.ES2022).statements) {
    const clause = ts.isExportDeclaration(statement) ? statement.exportClause : undefined;
    if (clause === undefined || !ts.isNamedExports(clause)) throw new Error(`${path} holds more than named exports`);
    const names = clause.elements.map(({ name }) => name.text);
    (ts.isExportDeclaration(statement) && statement.isTypeOnly ? types : values).push(...names);
  }
  return { module, values, types };
}

const main = readEntry('src/index.ts', '@gapwright/fem-core');
const entries = [
  main,
  ...subjects.map((subject) => readEntry(`src/entries/${subject}.ts`, `@gapwright/fem-core/${subject}`)),
];

test('the package opens one entry by subject for each file of src/entries, and the main one', () => {
  const wanted = subjects.map((subject): [string, string] => [`./${subject}`, `./dist/entries/${subject}`]);
  expect(Object.fromEntries(Object.entries(exports))).toEqual(
    Object.fromEntries(
      [['.', './dist/index'] as const, ...wanted].map(([key, path]) => [
        key,
        { types: `${path}.d.ts`, default: `${path}.js` },
      ]),
    ),
  );
});

test('every public name has one entry', () => {
  const names = entries.flatMap(({ values, types }) => [...values, ...types]);
  expect(names.filter((name, i) => names.indexOf(name) !== i)).toEqual([]);
});

test('the main entry has few names: thirty values at most, and what they take and give', () => {
  expect(main.values.length).toBeLessThanOrEqual(30);
  expect(main.values.length + main.types.length).toBeLessThanOrEqual(70);
});

describe.each(entries)('$module', ({ module, values }) => {
  test('loads alone, by its public name, in Node', () => {
    const program = `console.log(JSON.stringify(Object.keys(await import('${module}'))))`;
    const cwd = fileURLToPath(new URL('../cli/', home)); // a package that depends on it
    const printed = execFileSync(process.execPath, ['--input-type=module', '--eval', program], {
      cwd,
      encoding: 'utf8',
    });
    expect(JSON.parse(printed).sort()).toEqual([...values].sort());
  });
});
