import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { SectionResult } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { isNought } from '../../packages/cli/src/nought.js';
import { makeFolder, run } from './run.js';

/** A field of 1 T along +y that no body disturbs, known to rounding; and two like bars, between which symmetry leaves no field. */
const file = (edges: string, bars: string): string => `format: gapwright-section/1
name: Nothing here
depth: 50 mm
outline: { rectangle: { from: [-40 mm, -40 mm], to: [40 mm, 40 mm] } }
background: air
regions:
${bars}  - { name: body, material: copper, shape: { rectangle: { from: [-2 mm, -2 mm], to: [2 mm, 2 mm] } } }
${edges}probes:
  - { name: middle, point: [0 mm, 0 mm] }
  - { name: upwards, line: { from: [0 mm, -30 mm], to: [0 mm, 30 mm], points: 3 } }
  - { name: hold, force_on: body }
  - { name: through, flux_through: { from: [0 mm, -15 mm], to: [0 mm, 15 mm] } }
  - { name: linked, linkage_of: body }
model: { accuracy: 1 % }
`;
const UNIFORM = file('edges:\n  - { side: all, condition: applied, field: [0 T, 1 T] }\n', '');
const bar = (name: string, from: number): string =>
  `  - { name: ${name}, material: copper, shape: { rectangle: { from: [${from} mm, -5 mm], to: [${from + 10} mm, 5 mm] } }, current: 25 A }\n`;
const BARS = file('', bar('left', -20) + bar('right', 10));

async function solved(text: string): Promise<{ readonly sheet: string; readonly result: SectionResult }> {
  const path = join(makeFolder(), 'nothing.yaml');
  writeFileSync(path, text);
  const [sheet, json] = [await run(['section', path]), await run(['section', path, '--json'])];
  expect([sheet.status, json.status]).toEqual([0, 0]);
  return { sheet: sheet.out, result: JSON.parse(json.out) };
}

const finite = (values: object): number[] =>
  Object.entries(values).flatMap(([key, value]) =>
    !key.includes('rel_err') && typeof value === 'number' ? [value] : [],
  );

describe('what should be nothing is shown as 0 with what bounds it, and is in JSON as it was found', () => {
  test('between two like currents: no field, no flux, no force', async () => {
    const { sheet, result } = await solved(BARS);
    expect(sheet).toMatch(/middle +B 0 T +± \S+ [num]T\n/);
    expect(sheet).toMatch(/ H x 0, y 0 A\/m +± \S+ [mu]A\/m\n/);
    expect(sheet).toMatch(
      /hold +force x 0, y 0 N\/m +± \S+ [un]N\/m\n +torque 0 Nm\/m +± \S+ [np]Nm\/m\n +on 50 mm: x 0, y 0 N, 0 Nm\n/,
    );
    expect(sheet).toMatch(/linked +linkage \d\S+ uWb\/m +± \S+ %\n/); // there is flux round the pair
    const [middle, , hold] = result.probes.map(finite);
    for (const value of [...middle, ...hold]) expect(value).not.toBe(0);
  });

  test('in a uniform field: no force, no flux along it, no potential in the middle, and errors that are rounding are 0', async () => {
    const { sheet, result } = await solved(UNIFORM);
    expect(sheet).toMatch(/Energy +2\.546 kJ\/m +± 0 %\n/);
    expect(sheet).toMatch(/middle +B 1\.000 T \(x 0\.000, y 1\.000\) +± 0 %\n +A 0 Wb\/m +± /);
    expect(sheet).toMatch(/hold +force x 0, y 0 N\/m +± /);
    expect(sheet).toMatch(/through +flux 0 Wb\/m +± .*\n +on 50 mm: 0 Wb\n/);
    expect(sheet).toMatch(/linked +linkage 0 Wb\/m /);
    expect(sheet).not.toMatch(/\de-\d/);
    expect(finite(result.probes[0])).toContainEqual(expect.closeTo(1, 9));
  });

  test('what is there stays, however small it is', async () => {
    const { sheet } = await solved(UNIFORM.replace('1 T', '1e-9 T').replaceAll('[0 mm, 0 mm]', '[5 mm, 0 mm]'));
    expect(sheet).toMatch(/middle +B 1\.000e-9 T /);
    expect(sheet).toMatch(/ A -?5\.000 pWb\/m +± 0 %\n/);
  });
});

test('nought is what lies under the floor of rounding, or far under its own error where that is known', () => {
  expect(isNought(1e-13, 0, 1e-12)).toBe(true);
  expect(isNought(-1e-11, 1e-3, 1e-12)).toBe(false);
  expect(isNought(-1e-11, 10, 1e-12)).toBe(true);
  expect(isNought(1e-11, 1.9, 1e-12)).toBe(false);
  expect(isNought(1, Infinity, 1e-12)).toBe(false);
  expect(isNought(Number.NaN, Number.NaN, 1e-12)).toBe(false);
});
