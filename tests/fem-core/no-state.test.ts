import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { expect, test } from 'vitest';

const source = fileURLToPath(new URL('../../packages/fem-core/src/', import.meta.url));

/** Names at the top level of a module that calls could write to: `let`, and what begins empty, as zeros or as a new object. */
function scratchIn(text: string): string[] {
  const tree = ts.createSourceFile('module.ts', text, ts.ScriptTarget.ES2022, true);
  return tree.statements.filter(ts.isVariableStatement).flatMap(({ declarationList }) => {
    const constant = (declarationList.flags & ts.NodeFlags.Const) !== 0;
    return declarationList.declarations
      .filter(({ initializer }) => !constant || (initializer !== undefined && isScratch(initializer)))
      .map(({ name }) => name.getText());
  });
}

function isScratch(value: ts.Expression): boolean {
  if (ts.isNewExpression(value)) return true;
  const parts = ts.isArrayLiteralExpression(value)
    ? value.elements
    : ts.isObjectLiteralExpression(value)
      ? value.properties.map((property) => (ts.isPropertyAssignment(property) ? property.initializer : undefined))
      : undefined;
  return (
    parts?.every(
      (part) => part !== undefined && (part.getText() === '0' || (ts.isExpression(part) && isScratch(part))),
    ) ?? false
  );
}

test('no module keeps anything from one call to the next: two solves may take turns', () => {
  const files = readdirSync(source, { recursive: true, encoding: 'utf8' }).filter((path) => path.endsWith('.ts'));
  expect(files.length).toBeGreaterThan(100);
  const found = files.flatMap((path) =>
    scratchIn(readFileSync(source + path, 'utf8')).map((name) => `${path}: ${name}`),
  );
  expect(found).toEqual([]);
});

test('planted scratch is found; tables and functions are none', () => {
  const planted =
    'let a; let b = 1; const c = new Float64Array(6); const d = { h: 0, slope: 0 }; const e = []; const f = { of: new Map() };';
  expect(scratchIn(planted)).toEqual(['a', 'b', 'c', 'd', 'e', 'f']);
  expect(
    scratchIn('const g = 1; const h = [1, 2]; const i = () => { let j = 0; return j; }; const k = { l: 1 };'),
  ).toEqual([]);
});
