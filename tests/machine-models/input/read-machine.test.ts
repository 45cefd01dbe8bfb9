import { expect, test } from 'vitest';
import { edit, faultsOf, HUT, readHut, readText } from './hut.js';

test('the hut reads into the values of its file, in SI units', () => {
  const { machine } = readHut();
  expect(machine.name).toBe('Hut hydro, 106 V link');
  expect(machine.rotor).toEqual({
    poles: 16,
    arrangement: 'twin',
    gap: 0.019,
    disc: { material: 'AISI 1008', thickness: 0.01, innerRadius: 0.09, outerRadius: 0.165, clampRadius: 0.06 },
    magnets: {
      shape: 'block',
      width: 0.028,
      length: 0.055,
      thickness: 0.012,
      meanRadius: 0.128,
      material: 'magnet_42',
      temperature: 20,
    },
  });
  expect(machine.winding).toMatchObject({
    layout: 'concentrated',
    phases: 3,
    coils: 12,
    turns: 58,
    legWidth: 0.0205,
    legShape: 'parallel',
    opening: { innerRadius: 0.1045, outerRadius: 0.1515, innerWidth: 0.012, outerWidth: 0.03 },
    clearance: 0.002,
    thickness: 0.015,
    connection: 'star',
    paths: 1,
    temperature: 90,
  });
  expect(machine.winding.wire.diameter).toBeCloseTo(0.00118, 15);
  expect(machine.winding.wire.strandArea).toBeCloseTo((Math.PI / 4) * 0.00118 ** 2, 15);
  expect(machine.operation).toEqual({
    speedRpm: 420,
    overspeedRpm: 756,
    ambient: 15,
    cold: -10,
    load: { kind: 'bridge', voltage: 106, diodeDrop: 0.9 },
    cableResistance: 0,
  });
  expect(machine.model.accuracy).toBe(0.002);
  expect(machine.model.slices.map(({ radius }) => radius)).toEqual([0.1005, 0.128, 0.1555]);
  expect(machine.materials.magnet_42).toEqual({
    kind: 'magnet',
    remanence: 1.3,
    recoil: 1.05,
    remanenceSlope: -0.0012,
    coercivityIntrinsic: 955e3,
    coercivitySlope: -0.006,
    density: 7500,
    source: 'the machine file',
  });
});

test('the same machine as JSON reads the same', () => {
  const json = JSON.stringify({
    format: 'gapwright-machine/1',
    rotor: {
      poles: 8,
      gap: '14 mm',
      disc: { thickness: '6 mm', inner_radius: '20 mm', outer_radius: '80 mm' },
      magnets: { width: '25 mm', length: '30 mm', thickness: '8 mm', mean_radius: '52 mm', material: 'N42' },
    },
    winding: {
      layout: 'concentrated',
      coils: 6,
      turns: 52,
      leg_width: '12 mm',
      opening: { inner_radius: '38 mm', outer_radius: '66 mm', inner_width: '10 mm', outer_width: '20 mm' },
      wire: { awg: 18 },
    },
    operation: { speed: '670 rpm' },
  });
  const { machine } = readText(json);
  // What the file does not say has the documented defaults.
  expect(machine.rotor.arrangement).toBe('twin');
  expect(machine.rotor.disc?.material).toBe('AISI 1008');
  expect(machine.rotor.magnets).toMatchObject({ shape: 'block', temperature: 20 });
  expect(machine.winding).toMatchObject({
    phases: 3,
    connection: 'star',
    paths: 1,
    temperature: 20,
    clearance: 0.001,
    legShape: 'parallel',
  });
  expect(machine.winding.thickness).toBeCloseTo(0.012, 15);
  expect(machine.winding.wire.strands).toBe(1);
  expect(machine.operation).toEqual({ speedRpm: 670, ambient: 20, cableResistance: 0 });
  expect(machine.model).toMatchObject({ accuracy: 0.002, endCorrection: true });
  expect(machine.model.slices).toHaveLength(3);
});

test('inches, gauss and turns per second say the same machine', () => {
  const { machine } = readHut(
    'rotor.gap=0.748031496062992 in',
    'materials.magnet_42.remanence=13 kG',
    'operation.speed=7 rev/s',
  );
  expect(machine.rotor.gap).toBeCloseTo(0.019, 12);
  expect(machine.materials.magnet_42).toMatchObject({ remanence: 1.3 });
  expect(machine.operation.speedRpm).toBe(420);
});

test('wire gauges follow ASTM B258: AWG 18 has 1.0237 mm, AWG 36 exactly 0.127 mm', () => {
  const bare = (awg: number) => readHut(`winding.wire={awg: ${awg}}`).machine.winding.wire.diameter;
  expect(bare(18)).toBeCloseTo(1.023687e-3, 9);
  expect(bare(36)).toBeCloseTo(0.127e-3, 12);
});

test('flat wire has the section of its sides', () => {
  const { wire } = readHut('winding.wire={width: 4 mm, height: 1 mm, strands: 1}').machine.winding;
  expect(wire).toEqual({ strandArea: 4e-6, width: 0.004, height: 0.001, strands: 1 });
});

test('what only leaves figures out gives one warning for each key', () => {
  const { warnings } = readHut(
    'operation.cable={length: 40 m, section: 6 mm2}',
    'operation.drag={bearing: 0.15 Nm, windage: 2e-6 Nm.s2}',
    'operation.cooling={h: 30 W/m2K}',
    'operation.prime_mover={kind: table, points: [[300 rpm, 400 W], [420 rpm, 1160 W], [756 rpm, 0 W]]}',
    'prices={magnets: 60 EUR/kg, copper: 14 EUR/kg, steel: 3 EUR/kg}',
    'tolerances=[{key: rotor.gap, normal: 0.3 mm}, {key: materials.magnet_42.remanence, uniform: 2 %}]',
    'measured={phase_emf: {speed: 300 rpm, order: [1, 5], peak: [20 V, -1.6 V]}, phase_inductance: 0 mH}',
  );
  const keys = warnings.map(({ key }) => key);
  expect([...keys].sort()).toEqual(['measured', 'tolerances']);
  expect(readHut('operation.prime_mover={kind: wind}').warnings.map(({ key }) => key)).toEqual([
    'operation.prime_mover',
  ]);
  expect(readHut('model.end_correction=off').warnings.find(({ key }) => key === 'model.end_correction')?.text).toMatch(
    /^off: voltages are those of the slices alone/,
  );
});

test.each([
  '{ kind: bridge, voltage: 106 V, diode_drop: 0.9 V }',
  '{ kind: bridge, resistance: 6 ohm }',
  '{ kind: resistor, resistance: 4 ohm }',
  '{ kind: drive, current: 8 A }',
])('the load %s is read', (load) => {
  const { machine, warnings } = readHut(`operation.load=${load}`);
  expect(machine.operation.load?.kind).toBe(/kind: (\w+)/.exec(load)?.[1]);
  expect(warnings).toEqual([]);
});

test('a machine without a load or limits is complete, and nothing warns', () => {
  const { text } = edit(HUT.slice(HUT.indexOf('  load:'), HUT.indexOf('model:')), '');
  expect(readText(text).warnings).toEqual([]);
});

test('all faults of a file come at once, each in its place, in the order of the text', () => {
  const text = HUT.replace('poles: 16 ', 'poles: 17 ')
    .replace('  gap: 19 mm', '  gpa: 19 mm')
    .replace('width: 28 mm', 'width: 45 mm')
    .replace('thickness: 12 mm ', 'thickness: -12 mm')
    .replace('turns: 58', 'turns: 58\n  turns: 59')
    .replace('coils: 12', 'coils: 12 mm')
    .replace('speed: 420 rpm', 'speed: 420');
  const faults = faultsOf(() => readText(text));
  const keys = faults.map((line) => line.replace(/^hut\.yaml:\d+:\d+: ([^:]*):.*/, '$1'));
  expect(keys).toEqual([
    'rotor.gap',
    'rotor.poles',
    'rotor.gpa',
    'rotor.magnets.width',
    'rotor.magnets.thickness',
    'winding.coils',
    'winding.turns',
    'operation.speed',
  ]);
  const lines = faults.map((line) => Number(/^hut\.yaml:(\d+):/.exec(line)?.[1]));
  expect(lines).toEqual([...lines].sort((a, b) => a - b));
});

test('a fault is told as FILE:LINE:COLUMN: key: what is wrong; what would do', () => {
  const { text, at } = edit('thickness: 12 mm', 'thickness: -10 mm');
  const [line, column] = at.split(':').map(Number);
  expect(faultsOf(() => readText(text))).toEqual([
    `hut.yaml:${line}:${column + 11}: rotor.magnets.thickness: must be more than 0 mm, got -10 mm; give the size along the ` +
      'shaft, for example 10 mm',
  ]);
});

test('a fault in a setting is told in the setting', () => {
  expect(faultsOf(() => readHut('rotor.gap=20'))).toEqual([
    expect.stringMatching(/^--set rotor\.gap:1:1: rotor\.gap: needs a unit, got 20; give a length in m, mm/),
  ]);
  expect(faultsOf(() => readHut('rotor.gpa=20 mm'))).toEqual([
    '--set rotor.gpa:1:1: rotor.gpa: is not a known key; did you mean gap?',
  ]);
});

test('checks that need a value that could not be read keep silent, the others speak', () => {
  const faults = faultsOf(() =>
    readHut(
      'winding.opening.inner_radius=0',
      'rotor.magnets.mean_radius=wide',
      'winding.thickness=17 mm',
      'rotor.poles=15',
      'limits=3',
    ),
  );
  expect(faults.map((line) => line.replace(/^--set ([^:]*):.*/, '$1')).sort()).toEqual([
    'limits',
    'rotor.magnets.mean_radius',
    'rotor.poles',
    'winding.opening.inner_radius',
    'winding.thickness',
  ]);
  expect(faults.join()).not.toMatch(/NaN|undefined/);
});
