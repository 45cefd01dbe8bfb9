import { describe, expect, test } from 'vitest';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { checkSection } from '../../../packages/machine-models/src/section-file/check-section.js';
import { faultsOf } from '../input/hut.js';
import { editYoke, readYoke, YOKE } from './yoke.js';

/** Faults of reading, then of the drawing. */
function judge(text: string, settings: readonly string[] = []): readonly string[] {
  return faultsOf(() => {
    const { problem, place } = readYoke(settings, text);
    try {
      checkSection(problem);
    } catch (error) {
      throw error instanceof InputError ? place(error) : error;
    }
  });
}

describe('one piece of the file made wrong gives one fault, with its line and column', () => {
  test.each<readonly [from: string, to: string, where: string, message: string]>([
    [
      'gapwright-section/1',
      'gapwright-section/2',
      'gapwright-sect',
      'format: must be gapwright-section/1, got gapwright-section/2',
    ],
    ['depth: 40 mm', 'depth: 40', '40', 'depth: needs a unit, got 40'],
    ['depth: 40 mm', 'depht: 40 mm', 'depht: 40 mm', 'depht: is not a known key; did you mean depth?'],
    ['point: [60 mm, 50 mm]', 'point: [60, 50 mm]', '60, 50 mm]', 'probes.0.point.0: needs a unit, got 60'],
    ['point: [60 mm, 50 mm]', 'point: [60 mm]', '[60 mm]', 'probes.0.point: must be a pair, got a list of 1'],
    ['point: [60 mm, 50 mm]', 'point: [.nan, 50 mm]', '.nan, 50 mm]', 'probes.0.point.0: needs a unit, got .nan'],
    ['point: [60 mm, 50 mm]', 'point: [160 mm, 50 mm]', '[160 mm, 50 mm', 'probes.0.point: lies outside the outline'],
    ['[90 mm, 36 mm]', '[130 mm, 36 mm]', '[130 mm, 36 mm', 'probes.4.flux_through.to: lies outside the outline'],
    ['mu_r: 2000', 'mu_r: -2000', '-2000 }', 'materials.plate.mu_r: must be at least 1, got -2000'],
    ['mu_r: 2000', 'bh: [[100, 1], [50, 1.2]]', '[50, 1.2]] }', 'materials.plate.bh.1: does not rise in both columns'],
    [
      'mu_r: 2000',
      'mu_r: 2000, stacking_factor: 1.2',
      '1.2 }',
      'materials.plate.stacking_factor: must be at most 1, got 1.2',
    ],
    ['background: air', 'background: N42', 'N42', 'background: must be a material other than a magnet'],
    ['background: air', 'background: aer', 'aer', 'background: aer is not a known material; the nearest names are air'],
    ['material: plate', 'material: plates', 'plates, shape:', 'regions.0.material: plates is not a known material'],
    ['magnetised: 90 deg, ', '', '{ name: bar_ma', 'regions.4.magnetised: is missing, but N42 is a magnet'],
    ['magnetised: 90 deg', 'magnetised: 90', '90, shape: { c', 'regions.4.magnetised: needs a unit, got 90'],
    ['magnetised: 90 deg', 'magnetised: {}', '{}, shape: { c', 'regions.4.magnetised: tells no direction'],
    [
      'magnetised: 90 deg',
      'magnetised: { radial: out }',
      'out }, shape:',
      'regions.4.magnetised.radial: must be outward or inward, got out',
    ],
    [
      'magnetised: 90 deg',
      'magnetised: { turning: 1.5 }',
      '1.5 }, shape:',
      'regions.4.magnetised.turning: must be a whole number, got 1.5',
    ],
    [
      'magnetised: 90 deg',
      'magnetised: { turning: 1, radial: inward }',
      '{ turning: 1,',
      'regions.4.magnetised: gives radial and turning at once',
    ],
    [
      'magnetised: 90 deg',
      'magnetised: { radial: inward, angle: 3 deg }',
      '3 deg }, shape',
      'regions.4.magnetised.angle: means nothing beside radial',
    ],
    [
      'copper, shape: { circle',
      'copper, magnetised: 3 deg, shape: { circle',
      '3 deg, shape:',
      'regions.3.magnetised: goes with a magnet, but copper is of kind nonmagnetic',
    ],
    [
      'radius: 5 mm } }, current',
      'radius: 0 mm } }, current',
      '0 mm } }, curr',
      'regions.3.shape.circle.radius: must be more than 0 mm, got 0 mm',
    ],
    ['name: back', 'name: coil', 'coil, material', 'regions.2.name: coil is the name of regions.1 too'],
    ['turns: -200', 'turns: 0', '0, current: 3', 'regions.2.turns: must not be 0'],
    [
      'current_density: 2 A/mm2',
      'current_density: 2 A',
      '2 A }',
      'regions.3.current_density: must be a current density, got 2 A, but A is a unit of current',
    ],
    [
      'current_density: 2 A/mm2',
      'current_density: 2 A/mm2, current: 1 A',
      '{ name: bar, m',
      'regions.3: gives current and current_density at once',
    ],
    ['side: left', 'side: lift', 'lift, conditio', 'edges.0.side: lift is no side of the outline; did you mean left?'],
    [
      'side: left',
      'side: edge 3',
      'edge 3, condit',
      'edges.0.side: edge 3 is no side of the outline; sides here are: bottom, right, top, left; or all of them: all',
    ],
    [
      'condition: crossing',
      'condition: crosses',
      'crosses }',
      'edges.0.condition: must be closed, crossing, repeating, reversing, open or applied, got crosses',
    ],
    ['condition: crossing', 'condition: applied', '{ side: left,', 'edges.0.field: is missing'],
    [
      'condition: crossing',
      'condition: crossing, field: [0 T, 1 T]',
      'field: [0 T, 1',
      'edges.0.field: is not a known key',
    ],
    [
      'condition: crossing',
      'condition: repeating',
      'left, conditio',
      'edges.0.side: repeating binds two sides to each other, got left',
    ],
    [
      'condition: crossing',
      'condition: open',
      'left, conditio',
      'edges.0.side: open space lies round the whole outline, not at some sides; give side: all',
    ],
    ['side: left', 'side: [left, left]', 'left], conditi', 'edges.0.side.1: left has a condition already, by edges.0'],
    [
      'side: left, condition: crossing',
      'side: [left, top], condition: repeating',
      '[left, top], c',
      'edges.0.side: are not ',
    ],
    ['name: pull', 'name: centre', 'centre, force_', 'probes.2.name: centre is the name of probes.0 too'],
    ['force_on: bar_magnet', 'force_on: bar_mag', 'bar_mag }', 'probes.2.force_on: bar_mag is no region'],
    [
      'force_on: bar_magnet',
      'force_on: [bar, coyl]',
      'coyl] }',
      'probes.2.force_on.1: coyl is no region; did you mean coil?',
    ],
    ['force_on: bar_magnet', 'force_on: air', 'air }', 'probes.2.force_on: air is no region'],
    ['force_on: bar_magnet', 'linkage_of: [bar]', '[bar] }', 'probes.2.linkage_of: must be text, got a list'],
    [', force_on: bar_magnet', '', '{ name: pull }', 'probes.2: asks for nothing; give exactly one of point, line,'],
    [
      'force_on: bar_magnet',
      'force_on: bar, mean_over: bar',
      '{ name: pull,',
      'probes.2: asks for force_on and mean_over at once',
    ],
    [
      'linkage_of: back',
      'linkage_of: back, about: [1 mm, 1 mm]',
      '[1 mm, 1 mm] }',
      'probes.3.about: means nothing beside linkage_of',
    ],
    ['points: 91', 'points: 1', '1 } }', 'probes.1.line.points: must be at least 2, got 1'],
    ['points: 91', 'points: 1e9', '1e9 } }', 'probes.1.line.points: must be at most 10000, got 1000000000'],
    ['to: [120 mm, 50 mm]', 'to: [0 mm, 50 mm]', '{ from: [0 mm,', 'probes.1.line: has no length'],
    ['accuracy: 0.2 %', 'accuracy: 0 %', '0 % }', 'model.accuracy: must be more than 0 %, got 0 %'],
    ['accuracy: 0.2 %', 'accuracy: .nan', '.nan }', 'model.accuracy: '],
    // What the drawing alone shows
    [
      '[90 mm, 20 mm], [90 mm, 35 mm]',
      '[90 mm, 35 mm], [90 mm, 20 mm]',
      '{ polygon: [[2',
      'regions.0.shape: crosses or touches itself',
    ],
    [
      'centre: [10 mm, 80 mm]',
      'centre: [-30 mm, 80 mm]',
      '{ circle: { ce',
      'regions.3.shape: lies outside the outline',
    ],
    ['to: [60 mm, 50 mm]', 'to: [60 mm, 40 mm]', '{ rectangle: {', 'regions.1.shape: has no area'],
  ])('%s -> %s', (from, to, where, message) => {
    const { text, line } = editYoke(from, to);
    const faults = judge(text);
    expect(faults[0]).toContain(`: ${message}`);
    expect(faults).toHaveLength(to === 'name: coil' ? 2 : 1); // the yoke's average then asks for no region
    const [, row, column] = faults[0].split(':').map(Number);
    expect(row).toBe(line);
    expect(
      text
        .split('\n')
        [row - 1].slice(column - 1)
        .startsWith(where),
    ).toBe(true);
  });
});

test('a shape or a direction by a key unknown is none, and the key is told', () => {
  expect(judge(YOKE, ['regions.3.shape={circel: {}}', 'regions.4.magnetised={radials: out}'])).toEqual([
    expect.stringContaining('regions.3.shape: draws nothing; give exactly one of rectangle, polygon and circle'),
    expect.stringContaining('regions.4.magnetised: tells no direction'),
    expect.stringContaining('regions.3.shape.circel: is not a known key; did you mean circle?'),
    expect.stringContaining('regions.4.magnetised.radials: is not a known key; did you mean radial?'),
  ]);
});

test('all faults come in one run, in the order of the text', () => {
  const text = YOKE.replace('name: yoke', 'name: coil').replace('90 deg', '90').replace('side: left', 'side: lift');
  expect(judge(text.replace('linkage_of: back', 'linkage_of: bock')).map((fault) => fault.split(': ')[1])).toEqual([
    'regions.1.name',
    'regions.4.magnetised',
    'edges.0.side',
    'probes.3.linkage_of',
    'probes.5.mean_over',
  ]);
});

test('current without return in a repeating section is told at its edges', () => {
  const edges = 'edges=[{side: [left, right], condition: repeating}, {side: [top, bottom], condition: repeating}]';
  const [fault, ...more] = judge(YOKE, [edges, 'regions.2.current=1 A']);
  expect(more).toEqual([]);
  expect(fault).toMatch(/^--set edges:1:1: edges: no side fixes the potential and the currents sum to/);
});

test('a magnet by a curve: bad rows at the row, and not beside a remanence', () => {
  const set = (magnet: string) => judge(YOKE, [`materials.m={kind: magnet, ${magnet}}`]);
  expect(set('demagnetisation: [[0, 0.4], [-1e5, 0.5]]')).toEqual([
    expect.stringMatching(/^--set materials\.m:1:\d+: materials\.m\.demagnetisation\.1: does not fall in both columns/),
  ]);
  expect(set('remanence: 1 T, demagnetisation: [[0, 0.4], [-1e5, 0.1]]')).toEqual([
    expect.stringContaining('materials.m: gives remanence and demagnetisation at once'),
  ]);
  expect(set('demagnetisation: [[0, 4000], [-1e5, 3]]')).toEqual([expect.stringContaining('is more than any magnet')]);
  expect(set('recoil: 1.05')).toEqual([expect.stringContaining('materials.m.remanence: is missing')]);
});

test('a machine file is sent to its own command', () => {
  expect(judge('format: gapwright-machine/1\nrotor: {}\n')).toEqual([
    'yoke.yaml:1:9: format: says that this is a machine file; use gapwright solve',
  ]);
});

test("the solver's names are found in the file again, dots in names and all", () => {
  const settings = ['regions.3.name=bar.shape', 'regions.4.name=bar', 'probes.2.force_on=[bar, bar.shape]'];
  const { place } = readYoke(settings);
  const keyOf = (key: string, code = 'x') =>
    place(new InputError([{ code, key, wrong: '', remedy: '' }])).faults[0].key;
  expect(keyOf('regions.bar.shape')).toBe('regions.3');
  expect(keyOf('regions.bar.shape.shape')).toBe('regions.3.shape');
  expect(keyOf('regions.bar.maxEdge')).toBe('regions.4.max_edge');
  expect(keyOf('regions.yoke.shape.corners.2')).toBe('regions.0.shape.polygon.2');
  expect(keyOf('bar, bar.shape', 'no-force')).toBe('probes.2.force_on');
  expect(keyOf('probes.flux')).toBe('probes.4');
  expect(keyOf('edges.left')).toBe('edges.0.side');
  expect(keyOf('yoke')).toBe('regions.0.name');
  expect(keyOf('something else')).toBe('something else');
});
