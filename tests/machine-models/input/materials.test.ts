import { describe, expect, test } from 'vitest';
import { readBhCsv } from '../../../packages/machine-models/src/input/bh-csv.js';
import { faultsOf, HUT, readHut, readText } from './hut.js';

const PLATE = 'rotor.disc.material=plate';

test('materials of the file join the library, and one of the same name takes its place', () => {
  const { materials } = readHut(
    'materials.N42={kind: magnet, remanence: 1.31 T}',
    'materials.foil={kind: nonmagnetic, density: 2.7 g/cm3}',
  ).machine;
  expect(materials.N42).toMatchObject({
    remanence: 1.31,
    recoil: 1.05,
    remanenceSlope: -0.0012,
    source: 'the machine file',
  });
  expect(materials.foil).toEqual({ kind: 'nonmagnetic', density: 2700, source: 'the machine file' });
  expect(materials.copper).toMatchObject({ kind: 'nonmagnetic' });
});

test('steel by permeability or by a table, to which the origin is added where it is missing', () => {
  expect(readHut('materials.plate={kind: steel, mu_r: 2000}', PLATE).machine.materials.plate).toMatchObject({
    kind: 'steel',
    muR: 2000,
  });
  expect(
    readHut('materials.plate={kind: steel, bh: [[200, 0.5], [2000, 1.5]]}', PLATE).machine.materials.plate,
  ).toMatchObject({
    kind: 'steel-curve',
    bh: [
      [0, 0],
      [200, 0.5],
      [2000, 1.5],
    ],
  });
});

test.each([
  [
    'rotor.disc.material=AISI 1018',
    'rotor.disc.material: AISI 1018 is not a known material; the nearest names are AISI 1008',
  ],
  ['rotor.disc.material=copper', 'rotor.disc.material: must be a steel, but copper is of kind nonmagnetic'],
  ['rotor.disc.material=N42', 'rotor.disc.material: must be a steel, but N42 is of kind magnet'],
  ['rotor.disc.material=toString', 'rotor.disc.material: toString is not a known material'],
  [
    'rotor.magnets.material=N43',
    'rotor.magnets.material: N43 is not a known material; the nearest names are N40, N42, N45',
  ],
  ['rotor.magnets.material=n42', 'rotor.magnets.material: n42 is not a known material; the nearest names are N42'],
  ['rotor.magnets.material=DC01', 'rotor.magnets.material: must be a magnet material, but DC01 is of kind steel-curve'],
])('%s', (setting, message) => {
  const faults = faultsOf(() => readHut(setting));
  expect(faults).toHaveLength(1);
  expect(faults[0]).toContain(message);
});

describe('a steel described wrongly', () => {
  test.each([
    ['{kind: steel}', 'materials.plate: says nothing of its magnetisation; give exactly one of mu_r, bh and bh_file'],
    ['{kind: steel, mu_r: 9, bh: [[1, 1]]}', 'materials.plate: gives mu_r and bh at once'],
    ['{kind: steel, mu_r: 0.5}', 'materials.plate.mu_r: must be at least 1, got 0.5'],
    ['{kind: steel, bh: 3}', 'materials.plate.bh: must be a list, got 3'],
    ['{kind: steel, bh: [[1e-320, 1e-320]]}', 'materials.plate.bh.0: 1e-320 A/m is too little to be measured'],
    ['{kind: steel, bh: [[0, 0], [1, 2, 3]]}', 'materials.plate.bh.1: must be a pair, got a list of 3'],
    ['{kind: steel, bh: [[0, 0], [1 A/m, 2]]}', 'materials.plate.bh.1.0: must be a bare number, got 1 A/m'],
  ])('%s', (steel, message) => {
    const faults = faultsOf(() => readHut(`materials.plate=${steel}`));
    expect(faults).toHaveLength(1);
    expect(faults[0]).toContain(message);
  });

  test('rows that fall, and rows flatter than vacuum, are told at the row', () => {
    const text = HUT.replace(
      'materials:\n',
      'materials:\n  plate:\n    kind: steel\n    bh:\n      - [0, 0]\n      - [100, 1]\n      - [50, 1.2]\n      - [9e5, 1.3]\n',
    );
    const line = text.slice(0, text.indexOf('- [50, 1.2]')).split('\n').length;
    expect(faultsOf(() => readText(text))).toEqual([
      expect.stringMatching(
        new RegExp(`^hut\\.yaml:${line}:9: materials\\.plate\\.bh\\.2: does not rise in both columns`),
      ),
      expect.stringMatching(
        new RegExp(`^hut\\.yaml:${line + 1}:9: materials\\.plate\\.bh\\.3: rises less than vacuum would`),
      ),
    ]);
  });
});

test('a material that is described wrongly is not unknown as well', () => {
  expect(faultsOf(() => readHut('materials.plate={kind: steel, mu_r: x}', PLATE))).toHaveLength(1);
});

test('a magnet away from 20 degC whose slope is not given takes that of NdFeB, with a warning', () => {
  const told = (...settings: string[]) =>
    readHut('materials.m={kind: magnet, remanence: 1.3 T}', 'rotor.magnets.material=m', ...settings).warnings;
  const warning = { key: 'materials.m.remanence_slope', text: 'not given; -0.12 %/K, as usual for NdFeB, is taken' };
  expect(told('rotor.magnets.temperature=80 degC')).toContainEqual(warning);
  expect(told()).not.toContainEqual(warning);
});

test('a recoil permeability above 1.3 is allowed, with a warning', () => {
  expect(readHut('materials.magnet_42.recoil=1.4').warnings.map(({ key }) => key)).toContain(
    'materials.magnet_42.recoil',
  );
});

describe('a table in a file of its own', () => {
  const setting = 'materials.plate={kind: steel, bh_file: plate.csv}';
  const read = (csv: string) => readText(HUT, [setting, PLATE], { 'plate.csv': csv });

  test.each([
    ['200,0.5\n2000,1.5\n'],
    ['# plate\nH_A_per_m,B_T\n0,0\n200,0.5\n\n2000,1.5'],
    ['H [A/m]; B [T]\r\n0; 0\r\n200; 0.5\r\n2e3; 1.5\r\n'],
    ['0\t0\n200\t0.5\n2000\t1.5\n'],
    ['  200   0.5\n# a remark\n  2000   1.5\n'],
  ])('%j', (csv) => {
    expect(read(csv).machine.materials.plate).toMatchObject({
      kind: 'steel-curve',
      bh: [
        [0, 0],
        [200, 0.5],
        [2000, 1.5],
      ],
    });
  });

  test.each([
    [
      '200,0.5\n2000,one\n',
      'plate.csv:2:1: materials.plate.bh_file: is no row of two numbers: 2000,one; give H in A/m and B in T',
    ],
    ['H,B\nagain,again\n', 'plate.csv:2:1: materials.plate.bh_file: is no row of two numbers: again,again'],
    ['200,0.5,1\n', 'plate.csv:1:1: materials.plate.bh_file: is no row of two numbers: 200,0.5,1'],
    [
      '# x\n0,0\n200,0.5\n  100,0.6\n',
      'plate.csv:4:3: materials.plate.bh_file: does not rise in both columns: [100, 0.6] after [200, 0.5]',
    ],
    // H in kA/m, columns the other way round, B in kG
    [
      '0.3, 0.9\n1, 1.4\n',
      'plate.csv:1:1: materials.plate.bh_file: 0.9 T at 0.3 A/m makes the relative permeability 2.4e+6',
    ],
    [
      '0.5, 300\n1.5, 2000\n',
      'plate.csv:1:1: materials.plate.bh_file: 300 T is more than any material carries at 0.5 A/m',
    ],
    ['100, 5\n500, 14\n', 'plate.csv:1:1: materials.plate.bh_file: 5 T is more than any material carries at 100 A/m'],
    ['', 'plate.csv:1:1: materials.plate.bh_file: the table has too few rows'],
  ])('%j is told at its own line', (csv, message) => {
    expect(faultsOf(() => read(csv)).join('\n')).toContain(message);
  });

  test('a file that cannot be read is told at the key that names it', () => {
    const faults = faultsOf(() => readHut('materials.plate={kind: steel, bh_file: nothing.csv}'));
    expect(faults).toEqual([
      '--set materials.plate:1:24: materials.plate.bh_file: cannot be read: there is no such file; name a CSV file beside this one',
    ]);
  });

  test('rows beyond 10 000 are not read', () => {
    const { rows, faults } = readBhCsv(
      Array.from({ length: 20_000 }, (_, i) => `${i + 1},${i + 1}`).join('\n'),
      'a.csv',
    );
    expect(rows).toHaveLength(10_000);
    expect(faults.map(({ wrong }) => wrong)).toEqual(['has more than 10000 rows']);
  });
});

describe('a demagnetisation curve in a file of its own', () => {
  const setting = 'materials.m={kind: magnet, demagnetisation_file: m.csv}';
  const read = (csv: string, ...more: readonly string[]) =>
    readText(HUT, [setting, ...more], { 'm.csv': csv }).machine.materials.m;

  test('gives curve and remanence', () => {
    expect(read('# at 20 degC\nH, B\n0, 1.2\n-4e5, 0.67\n-420000, 0.2\n')).toMatchObject({
      kind: 'magnet',
      remanence: 1.2,
      demagnetisation: [
        [0, 1.2],
        [-4e5, 0.67],
        [-4.2e5, 0.2],
      ],
    });
  });

  test.each([
    ['0, 1.2\n-4e5 A/m, 0.67\n', 'm.csv:2:1: materials.m.demagnetisation_file: is no row of two numbers'],
    ['0, 1.2\n-4e5\n', 'give H in A/m and B in T, for example -4e5, 0.67'],
    [
      '0, 1.2\n  4e5, 0.67\n',
      'm.csv:2:3: materials.m.demagnetisation_file: lies outside the second and third quadrants',
    ],
    ['H,B\n-1e5, 1.0\n-4e5, 0.6\n', 'm.csv:2:1: materials.m.demagnetisation_file: is no remanence'],
    ['0, 1.2\n\n-4e5, 1.3\n', 'm.csv:3:1: materials.m.demagnetisation_file: does not fall in both columns'],
    ['0, 12\n-4e5, 6.7\n', "m.csv:1:1: materials.m.demagnetisation_file: 12 T is more than any magnet's remanence"],
    ['0, 1.2\n', 'm.csv:1:1: materials.m.demagnetisation_file: the curve has too few rows'],
  ])('%j is told at its own line', (csv, message) => {
    const faults = faultsOf(() => read(csv));
    expect(faults).toHaveLength(1);
    expect(faults[0]).toContain(message);
  });

  test('beside a remanence or rows of the file itself is refused', () => {
    const csv = '0, 1.2\n-4e5, 0.67\n';
    const [remanence] = faultsOf(() => read(csv, 'materials.m.remanence=1.2 T'));
    expect(remanence).toContain('materials.m: gives remanence and demagnetisation_file at once');
    const [rows] = faultsOf(() => read(csv, 'materials.m.demagnetisation=[[0, 1.2], [-4e5, 0.67]]'));
    expect(rows).toContain('materials.m: gives demagnetisation and demagnetisation_file at once');
  });

  test('that cannot be read is told once', () => {
    const faults = faultsOf(() => readHut(setting, 'rotor.magnets.material=m'));
    expect(faults).toHaveLength(1);
    expect(faults[0]).toContain('materials.m.demagnetisation_file: cannot be read: there is no such file');
  });
});

test('the usual highest temperature of a magnet of the file', () => {
  const { materials } = readHut('materials.m={kind: magnet, remanence: 1.2 T, highest_temperature: 176 degF}').machine;
  expect(materials.m).toMatchObject({ highestTemperature: 80 });
});
