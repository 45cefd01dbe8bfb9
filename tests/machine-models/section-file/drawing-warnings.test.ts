import { describe, expect, test } from 'vitest';
import { checkSection } from '../../../packages/machine-models/src/section-file/check-section.js';
import { readYoke, YOKE } from './yoke.js';

/** Warnings of the drawing, with the line where each stands and what stands there. */
function warningsOf(settings: readonly string[], text = YOKE): readonly string[] {
  const { problem, locate } = readYoke(settings, text);
  return checkSection(problem).map((warning) => {
    const at = locate(warning);
    return `${at?.line}:${at?.column}: ${warning.key}: ${warning.text}`;
  });
}

const placeIn = (text: string, piece: string): string => {
  const before = text.slice(0, text.indexOf(piece)).split('\n');
  return `${before.length}:${(before.at(-1) ?? '').length + 1}`;
};

/** The yoke with one region more, drawn last. */
const withLast = (region: string): string => YOKE.replace('edges:', `  - { name: last, ${region} }\nedges:`);
const over = (material: string, more = ''): string =>
  withLast(`material: ${material}, ${more}shape: { rectangle: { from: [5 mm, 60 mm], to: [70 mm, 90 mm] } }`);
const noForce = 'probes=[]';

describe('a region that later ones cover is told where it stands', () => {
  const text = over('air');

  test('a magnet, and a current density: what they were for is lost', () => {
    expect(warningsOf([noForce], text)).toEqual([
      `${placeIn(text, '{ name: bar,')}: regions.3: later regions cover all of it: its current flows nowhere; draw it after them, or leave it out`,
      `${placeIn(text, '{ name: bar_magnet')}: regions.4: later regions cover all of it: this magnet does nothing; draw it after them, or leave it out`,
    ]);
  });

  test('a plain one too; not one of which anything is left, however little', () => {
    expect(warningsOf([noForce, 'regions.3.current_density=0 A/mm2'], text)[0]).toContain('it changes nothing');
    expect(warningsOf([noForce, 'regions.5.shape.rectangle.from=[5.01 mm, 60 mm]'], text)).toHaveLength(1);
    expect(warningsOf([])).toEqual([]);
  });
});

describe('a section in which nothing makes a field', () => {
  const bare = [noForce, 'regions.1.current=0 A', 'regions.2.current=0 A', 'regions.3.current_density=0 A/mm2'];
  const quiet = [...bare, 'materials.spent={kind: magnet, remanence: 0.001 T, recoil: 1.1}'];
  const without = YOKE.replace(/ {2}- \{ name: bar_magnet.*\n/, '');

  test('is told at its regions', () => {
    expect(warningsOf(bare, without)).toEqual([
      expect.stringMatching(/^9:3: regions: nothing makes a field: no current, no magnet, no applied field; /),
    ]);
    expect(warningsOf([...bare, 'edges=[{side: all, condition: applied, field: [0 T, 0 T]}]'], without)).toHaveLength(
      1,
    );
    const hidden = over('air');
    expect(warningsOf(bare, hidden).at(-1)).toContain('nothing makes a field'); // its magnet is covered
  });

  test.each([
    ['a current', 'regions.1.current=1 mA'],
    ['a density', 'regions.3.current_density=1 A/mm2'],
    ['an applied field', 'edges=[{side: all, condition: applied, field: [0 T, 1 mT]}]'],
  ])('is none with %s', (_, source) => {
    expect(warningsOf([...bare, source], without)).toEqual([]);
  });

  test('is none with a magnet, however weak, by remanence, turning or by curve', () => {
    expect(warningsOf(bare)).toEqual([]);
    expect(warningsOf([...quiet, 'regions.4.material=spent'])).toEqual([]);
    expect(warningsOf([...quiet, 'regions.4.material=spent', 'regions.4.magnetised={turning: 2}'])).toEqual([]);
    const curve = 'materials.m={kind: magnet, recoil: 1.1, demagnetisation: [[0, 0.4], [-1e5, 0.1]]}';
    expect(warningsOf([...bare, curve, 'regions.4.material=m'])).toEqual([]);
  });
});

test('a warning of the file stands where its key does, one of no key nowhere', () => {
  const { warnings, locate } = readYoke(['probes.1.line.to=[140 mm, 50 mm]']);
  expect(warnings.map(locate)).toEqual([{ file: 'yoke.yaml', line: 18, column: expect.any(Number) }]);
  expect(locate({ key: '', text: 'did not converge' })).toBeUndefined();
});
