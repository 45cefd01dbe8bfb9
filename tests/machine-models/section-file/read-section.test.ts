import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { MU0 } from '../../../packages/fem-core/src/base/constants.js';
import type { Material } from '../../../packages/fem-core/src/materials/material.js';
import { checkSection } from '../../../packages/machine-models/src/section-file/check-section.js';
import { readSection, type SectionProblem } from '../../../packages/machine-models/src/section-file/read-section.js';
import { readYoke, YOKE } from './yoke.js';

const read = (...settings: string[]): SectionProblem => readYoke(settings).problem;
const materialOf = (region: string, ...settings: string[]): Material => read(...settings).setup.materials[region];
const edgesOf = (value: string, ...settings: string[]) => read(`edges=${value}`, ...settings);

test('lengths become metres, shapes those of the solver, regions keep their order', () => {
  const { section, name, depth, accuracy } = read();
  expect([name, depth, accuracy]).toEqual(['Gapped yoke', 0.04, 0.002]);
  expect(section.outline).toEqual({ kind: 'rectangle', from: [0, 0], to: [0.12, 0.1] });
  expect(section.background).toBe('air');
  expect(section.regions.map((region) => region.name)).toEqual(['yoke', 'coil', 'back', 'bar', 'bar_magnet']);
  expect(section.regions[3].shape).toEqual({ kind: 'circle', centre: [0.01, 0.08], radius: 0.005 });
  expect(section.regions[0].shape).toMatchObject({ kind: 'polygon', corners: [[0.02, 0.02], [0.09, 0.02], {}, {}] });
  expect(section.open).toBeUndefined();
});

test('a coil carries turns x current, a return side the opposite; a density stands for itself', () => {
  const { current, currentDensity } = read().setup;
  expect({ ...current }).toEqual({ coil: 600, back: -600 });
  expect({ ...currentDensity }).toEqual({ bar: 2e6 });
  expect({
    ...read(
      'regions.1={name: coil, material: copper, shape: {circle: {centre: [10 mm, 50 mm], radius: 2 mm}}, current: 7 A}',
    ).setup.current,
  }).toEqual({ coil: 7, back: -600 });
});

test('linkage takes the turns of its region, sign and all, whatever the current', () => {
  expect(read().probes[3]).toEqual({ kind: 'linkage', name: 'linkage', of: 'back', turns: -200 });
  expect(read('regions.2.current=-9 A').probes[3]).toMatchObject({ turns: -200 });
  expect(read('probes.3.linkage_of=bar').probes[3]).toMatchObject({ of: 'bar', turns: 1 });
});

test('each probe becomes the one of the solver', () => {
  const [point, line, force, , flux, mean] = read(
    'probes.5.mean_over=[yoke, air]',
    'probes.2.about=[60 mm, 70 mm]',
  ).probes;
  expect(point).toEqual({ kind: 'point', name: 'centre', at: [0.06, 0.05] });
  expect(line).toEqual({ kind: 'line', name: 'across', from: [0, 0.05], to: [0.12, 0.05], points: 91 });
  expect(force).toEqual({ kind: 'force', name: 'pull', on: ['bar_magnet'], about: [0.06, 0.07] });
  expect(flux).toEqual({ kind: 'flux', name: 'flux', from: [0.02, 0.036], to: [0.09, 0.036] });
  expect(mean).toEqual({ kind: 'mean', name: 'average', over: ['yoke', 'air'] });
  expect(read('probes.2.force_on=[coil, back]').probes[2]).toMatchObject({ on: ['coil', 'back'] });
});

describe('materials', () => {
  test('of the library, of the file, and laminated: k mu_r + 1 - k, and k B + (1 - k) mu0 H', () => {
    expect(materialOf('yoke')).toEqual({ kind: 'linear', muR: 2000 });
    expect(materialOf('air')).toEqual({ kind: 'linear', muR: 1 });
    expect(materialOf('yoke', 'materials.plate.stacking_factor=0.5')).toEqual({ kind: 'linear', muR: 1000.5 });
    const curve = materialOf('yoke', 'materials.plate={kind: steel, bh: [[1000, 1]], stacking_factor: 0.9}');
    expect(curve.kind === 'curve' && [...curve.curve.b]).toEqual([0, 0.9 * 1 + (1 - 0.9) * MU0 * 1000]);
    expect(materialOf('yoke', 'regions.0.material=DC01').kind).toBe('curve');
  });

  test('a magnet points where it is told', () => {
    const magnet = materialOf('bar_magnet');
    expect(magnet.kind).toBe('magnet');
    if (magnet.kind !== 'magnet') return;
    expect(magnet.remanence[0]).toBeCloseTo(0, 12);
    expect(magnet.remanence[1]).toBeCloseTo(1.305, 12);
  });

  test.each([
    ['{radial: outward}', { angle: 0, turns: 1, centre: [0.06, 0.07] }],
    ['{radial: inward, centre: [1 mm, 2 mm]}', { angle: Math.PI, turns: 1, centre: [0.001, 0.002] }],
    ['{turning: 3, angle: 90 deg}', { angle: Math.PI / 2, turns: 3, centre: [0.06, 0.07] }],
    ['{turning: -1}', { angle: 0, turns: -1, centre: [0.06, 0.07] }],
    ['{wavelength: 80 mm}', { angle: 0, gradient: [(2 * Math.PI) / 0.08, 0] }],
    [
      '{wavelength: 2 m, along: 180 deg, angle: 90 deg, sense: clockwise, centre: [1 m, 0 m]}',
      { angle: Math.PI / 2, gradient: [Math.PI, expect.closeTo(0, 12)], centre: [1, 0] },
    ],
  ])('magnetised %s', (magnetised, direction) => {
    expect(materialOf('bar_magnet', `regions.4.magnetised=${magnetised}`)).toEqual({
      kind: 'directed-magnet',
      direction,
      recoil: 1.05,
      along: 1.305,
    });
  });

  test('a demagnetisation curve is followed along the direction', () => {
    const magnet = materialOf(
      'bar_magnet',
      'materials.soft={kind: magnet, recoil: 1.1, demagnetisation: [[0, 0.4], [-220e3, 0.11], [-260e3, -0.2]]}',
      'regions.4.material=soft',
    );
    if (magnet.kind !== 'directed-magnet' || typeof magnet.along === 'number') throw new Error('no curve');
    expect(magnet.direction.angle).toBeCloseTo(Math.PI / 2, 14);
    expect([[...magnet.along.h], [...magnet.along.b], magnet.recoil]).toEqual([
      [-260e3, -220e3, 0],
      [-0.2, 0.11, 0.4],
      1.1,
    ]);
  });
});

describe('edges', () => {
  test('by name, by list, all of them; what is not named stays closed', () => {
    expect({ ...read().setup.edges }).toEqual({ left: { kind: 'crossing' } });
    expect({
      ...edgesOf('[{side: [left, top], condition: crossing}, {side: right, condition: closed}]').setup.edges,
    }).toEqual({
      left: { kind: 'crossing' },
      top: { kind: 'crossing' },
      right: { kind: 'closed' },
    });
    const applied = { kind: 'applied', field: [0, 0.001] };
    expect({ ...edgesOf('[{side: all, condition: applied, field: [0 T, 1 mT]}]').setup.edges }).toEqual({
      left: applied,
      right: applied,
      top: applied,
      bottom: applied,
    });
  });

  test('repeating and reversing match the two sides they name, or two chains of sides', () => {
    const { section, setup } = edgesOf('[{side: [left, right], condition: reversing}]');
    expect(section.matched).toEqual([['left', 'right']]);
    expect({ ...setup.edges }).toEqual({ left: { kind: 'reversing' }, right: { kind: 'reversing' } });
    const bent =
      '{polygon: [[0 mm, 0 mm], [120 mm, 0 mm], [130 mm, 50 mm], [120 mm, 100 mm], [0 mm, 100 mm], [10 mm, 50 mm]]}';
    const chains = edgesOf('[{side: [[edge 2, edge 3], [edge 6, edge 5]], condition: repeating}]', `outline=${bent}`);
    expect(chains.section.matched).toEqual([
      [
        ['edge 2', 'edge 3'],
        ['edge 6', 'edge 5'],
      ],
    ]);
    expect(Object.keys(chains.setup.edges ?? {})).toEqual(['edge 2', 'edge 3', 'edge 6', 'edge 5']);
  });

  test('open space has no sides, and points may lie anywhere in it', () => {
    const { section, setup } = edgesOf('[{side: all, condition: open}]', 'probes.0.point=[3 m, 4 m]');
    expect(section.open).toBe(true);
    expect({ ...setup.edges }).toEqual({});
  });
});

test('element sizes, limits and the defaults of what is left out', () => {
  const { section, maxTriangles, maxMeshes } = read(
    'regions.0.max_edge=2 mm',
    'max_edge=9 mm',
    'size_at=[{point: [60 mm, 50 mm], max_edge: 1 mm}]',
    'model={max_triangles: 5000, max_meshes: 3}',
  );
  expect([section.regions[0].maxEdge, section.maxEdge]).toEqual([0.002, 0.009]);
  expect(section.sizeAt).toEqual([{ at: [0.06, 0.05], maxEdge: 0.001 }]);
  expect([maxTriangles, maxMeshes]).toEqual([5000, 3]);
  const least = readSection(
    'format: gapwright-section/1\noutline: {circle: {centre: [0 m, 0 m], radius: 1 m}}\nbackground: air\n',
    { file: 'x' },
  );
  expect(least.problem).toMatchObject({ name: 'unnamed section', depth: 1, accuracy: 0.002, probes: [] });
  expect(least.warnings).toEqual([]);
});

test('the background goes by its material, or by another name where a region has that one', () => {
  expect(read('regions.3.name=air').section.background).toBe('background');
  expect(read('regions.3.name=air', 'regions.1.name=background').section.background).toBe('background 2');
});

test('a line that reaches beyond the outline is warned of, not refused', () => {
  expect(readYoke(['probes.1.line.to=[200 mm, 50 mm]']).warnings).toEqual([
    { key: 'probes.1.line', text: expect.stringContaining('beyond the outline') },
  ]);
});

test('names that JavaScript knows are names like any other', () => {
  const { setup, section } = read(
    'regions.3.name=constructor',
    'regions.4.name=toString',
    'probes.2.force_on=toString',
  );
  expect(setup.currentDensity?.constructor).toBe(2e6);
  expect(setup.current?.toString).toBeUndefined();
  expect(section.regions[4].name).toBe('toString');
});

test('the example sections are sound, and so is the yoke', () => {
  const folder = new URL('../../../packages/cli/sections/', import.meta.url);
  const texts = readdirSync(folder).map((name) => readFileSync(new URL(name, folder), 'utf8'));
  expect(texts.length).toBeGreaterThanOrEqual(3);
  for (const text of [...texts, YOKE]) {
    const { problem, warnings } = readSection(text, { file: 'x' });
    expect(warnings).toEqual([]);
    checkSection(problem);
  }
});
