import type { Section } from '@gapwright/fem-core';
import { InputError } from '@gapwright/fem-core';
import { meshSection } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { checkForm } from '../../../packages/fem-core/src/geometry/check-form.js';
import { circle, drawing, polygon, rectangle } from './drawings.js';

/** Key and code of each fault of what is handed over in place of a section. */
function faultsOf(section: unknown): string[] {
  try {
    checkForm(section);
  } catch (error) {
    if (error instanceof InputError) return error.faults.map((fault) => `${fault.key}: ${fault.code}`);
    throw error;
  }
  return [];
}

const plain = { outline: rectangle(0, 0, 1, 1), background: 'air', regions: [] };
const region = (more: object) => ({ ...plain, regions: [{ name: 'bar', shape: circle(0.5, 0.5, 0.1), ...more }] });

describe('what plain JavaScript may hand over', () => {
  test('a section passes', () => {
    expect(faultsOf({ ...region({ maxEdge: 0.1 }), matched: [['left', ['right']]], open: false })).toEqual([]);
    expect(faultsOf({ ...plain, sizeAt: [{ at: [0, 0], maxEdge: 0.1, growth: 0 }] })).toEqual([]);
  });

  test.each<[unknown, string[]]>([
    [undefined, ['section: bad-form']],
    ['square', ['section: bad-form']],
    [{}, ['outline: bad-form', 'background: bad-form', 'regions: bad-form']],
    [{ ...plain, background: '' }, ['background: bad-form']],
    [{ ...plain, regions: 'none' }, ['regions: bad-form']],
    [{ ...plain, regions: [undefined, 3] }, ['regions.0: bad-form', 'regions.1: bad-form']],
    [region({ name: undefined }), ['regions.0.name: bad-form']],
    [region({ name: 7, shape: 'round' }), ['regions.0.name: bad-form', 'regions.0.shape: bad-form']],
    [region({ shape: undefined }), ['regions.bar.shape: bad-form']],
    [region({ shape: { kind: 'blob' } }), ['regions.bar.shape.kind: bad-form']],
    [region({ shape: { kind: Symbol('circle') } }), ['regions.bar.shape.kind: bad-form']],
    [region({ shape: { kind: 'polygon' } }), ['regions.bar.shape.corners: bad-form']],
    [
      region({ shape: { kind: 'polygon', corners: [[0, 0], [1], null, [0, 1]] } }),
      ['regions.bar.shape.corners.1: bad-form', 'regions.bar.shape.corners.2: bad-form'],
    ],
    [
      region({ shape: { kind: 'circle', radius: '0.1' } }),
      ['regions.bar.shape.centre: bad-form', 'regions.bar.shape.radius: bad-form'],
    ],
    [region({ shape: circle(0.5, Number.NaN, 0.1) }), ['regions.bar.shape.centre: not-finite']],
    [region({ shape: circle(0.5, 0.5, Number.POSITIVE_INFINITY) }), ['regions.bar.shape.radius: not-finite']],
    [region({ shape: { kind: 'rectangle', from: { x: 0, y: 0 }, to: [1, 1] } }), ['regions.bar.shape.from: bad-form']],
    [region({ maxEdge: '1 mm' }), ['regions.bar.maxEdge: bad-edge-length']],
    [{ ...plain, maxEdge: null }, ['maxEdge: bad-edge-length']],
    [{ ...plain, matched: ['left', 'right'] }, ['matched: bad-form']],
    [{ ...plain, matched: [['left', []]] }, ['matched: bad-form']],
    [{ ...plain, open: 'yes' }, ['open: bad-form']],
    [{ ...plain, sizeAt: {} }, ['sizeAt: bad-form']],
    [
      { ...plain, sizeAt: [{ at: [0], maxEdge: 0, growth: -1 }] },
      ['sizeAt.0.at: bad-form', 'sizeAt.0.maxEdge: bad-edge-length', 'sizeAt.0.growth: bad-form'],
    ],
  ])('%j', (section, faults) => {
    expect(faultsOf(section)).toEqual(faults);
  });

  test('of very many faults fifty are told', () => {
    expect(faultsOf({ ...plain, regions: Array.from({ length: 1000 }, () => 1) })).toHaveLength(50);
  });
});

/** Values in places where they do not belong. */
const oddities = fc.constantFrom<unknown>(
  undefined,
  null,
  Number.NaN,
  Number.POSITIVE_INFINITY,
  -1,
  0,
  1e300,
  1e-300,
  '',
  'polygon',
  true,
  [],
  {},
  [[]],
  [0, 0, 0],
  [1, '2'],
);

/** The section with one of the values within it replaced. */
function spoiled(section: Section, pick: number, by: unknown): unknown {
  const copy: unknown = structuredClone(section);
  const places: (readonly [holder: Record<string, unknown>, key: string])[] = [];
  const gather = (value: unknown): void => {
    if (typeof value !== 'object' || value === null) return;
    for (const [key, inner] of Object.entries(value)) {
      places.push([value as Record<string, unknown>, key]);
      gather(inner);
    }
  };
  gather(copy);
  const [holder, key] = places[Math.floor(pick * places.length)];
  holder[key] = by;
  return copy;
}

test('one odd value anywhere in a section gives a mesh or faults, never another error', () => {
  const whole = drawing(
    [circle(0.3, 0.3, 0.2), polygon([0.5, 0.5], [0.9, 0.6], [0.6, 0.9]), rectangle(0.6, 0.1, 0.9, 0.3)],
    {
      maxEdge: 0.5,
      matched: [['left', 'right']],
      sizeAt: [{ at: [0.5, 0.5], maxEdge: 0.2, growth: 0.5 }],
      open: false,
    },
  );
  let refused = 0;
  fc.assert(
    fc.property(fc.double({ min: 0, max: 0.9999, noNaN: true }), oddities, (pick, by) => {
      try {
        const mesh = meshSection(spoiled(whole, pick, by) as Section, { minAngle: 0.4, maxTriangles: 20_000 });
        expect(mesh.xy.every(Number.isFinite)).toBe(true);
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        refused++;
        for (const fault of error.faults) expect(fault.key).not.toBe('');
      }
    }),
    { seed: 61, numRuns: 600 },
  );
  expect(refused).toBeGreaterThan(300);
});
