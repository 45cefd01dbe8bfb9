import { describe, expect, test } from 'vitest';
import { findTableFaults } from '../../../packages/fem-core/src/materials/bh-curve.js';
import { MATERIAL_LIBRARY } from '../../../packages/machine-models/src/materials/library.js';

const MU0 = 4e-7 * Math.PI;

function tableOf(name: string): readonly (readonly [number, number])[] {
  const material = MATERIAL_LIBRARY[name];
  if (material?.kind !== 'steel-curve') throw new Error(`${name} has no table`);
  return material.bh;
}

const steels = Object.keys(MATERIAL_LIBRARY).filter((name) => MATERIAL_LIBRARY[name].kind === 'steel-curve');
const magnets = Object.entries(MATERIAL_LIBRARY).flatMap(([name, material]) =>
  material.kind === 'magnet' ? [{ name, ...material }] : [],
);

test('every material says where its figures come from', () => {
  for (const { source } of Object.values(MATERIAL_LIBRARY)) expect(source.length).toBeGreaterThan(10);
});

describe.each(steels)('%s', (name) => {
  test('is a table any solver can use: rising, nowhere flatter than vacuum', () => {
    expect(findTableFaults(tableOf(name))).toEqual([]);
  });

  test('never loses polarisation, and ends not much steeper than vacuum, whose slope continues it', () => {
    const table = tableOf(name);
    const polarisation = table.map(([h, b]) => b - MU0 * h);
    expect(polarisation.every((j, i) => i === 0 || j > polarisation[i - 1] - 1e-12)).toBe(true);
    const [[h1, b1], [h2, b2]] = table.slice(-2);
    expect((b2 - b1) / (h2 - h1) / MU0).toBeLessThan(5);
  });

  test('goes on into saturation', () => {
    expect(tableOf(name).at(-1)?.[1] ?? 0).toBeGreaterThan(name === 'cast iron' ? 1.4 : 1.79);
  });
});

// Rows and ends as tabulated from the same published fits by others (Modelica Standard Library's parameters).
test.each([
  ['AISI 1008', 0.45, 215.54982],
  ['AISI 1008', 1, 382.1364],
  ['AISI 1008', 2.1, 39053.862],
  ['DC01', 0.02, 138.72675],
  ['DC01', 0.1, 179.11702],
  ['M330-50A', 0.1, 47.383074],
])('%s needs at %d T the field of the published fit, %d A/m', (name, flux, field) => {
  const row = tableOf(name).find(([, b]) => b === flux);
  expect((row?.[0] ?? 0) / field).toBeCloseTo(1, 6);
});

test.each([
  ['AISI 1008', 2.55, 2.24503],
  ['DC01', 2.55, 2.44261],
  ['M330-50A', 1.8, 1.57943],
])('%s ends at B = %d T with the polarisation J = %d T', (name, flux, peak) => {
  const [h, b] = tableOf(name).at(-1) ?? [0, 0];
  expect(b).toBe(flux);
  expect(b - MU0 * h).toBeCloseTo(peak, 4);
});

test('the common grades are there, with the middle of their remanence range (supplier table after IEC 60404-8-1)', () => {
  const grades = [
    'N35',
    'N38',
    'N40',
    'N42',
    'N45',
    'N48',
    'N50',
    'N52',
    'N42H',
    'N42SH',
    'N38UH',
    'N35EH',
    'Y30',
    'C8',
  ];
  for (const grade of grades) expect(MATERIAL_LIBRARY).toHaveProperty([grade, 'kind'], 'magnet');
  expect(MATERIAL_LIBRARY.N42).toMatchObject({ remanence: 1.305, recoil: 1.05, coercivityIntrinsic: 955e3 });
  expect(MATERIAL_LIBRARY.N42SH).toMatchObject({ remanence: 1.305, coercivityIntrinsic: 1592e3 });
});

test('the energy product of a straight line, Br^2 / (4 mu0 mu), agrees with the class the grade number names (MGOe)', () => {
  const MGOE = 1e5 / (4 * Math.PI); // J/m^3: 1 G = 1e-4 T, 1 Oe = 1e3/(4 pi) A/m
  for (const { name, remanence, recoil } of magnets) {
    const grade = /^N(\d+)/.exec(name)?.[1];
    if (grade === undefined) continue;
    const product = remanence ** 2 / (4 * MU0 * recoil);
    expect(Math.abs(product / (Number(grade) * MGOE) - 1)).toBeLessThan(0.08);
  }
});

test('magnets weaken when hot; ferrite alone loses coercivity in the cold', () => {
  for (const { name, remanenceSlope, coercivitySlope } of magnets) {
    expect(remanenceSlope).toBeLessThan(0);
    expect(Math.sign(coercivitySlope ?? 0)).toBe(/^[YC]/.test(name) ? 1 : -1);
  }
});
