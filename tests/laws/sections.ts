import type { Field, FieldValue, Material, Region, Section, Setup } from '@gapwright/fem-core';
import { buildBHCurve, buildLocator, valueAt } from '@gapwright/fem-core';

export const AIR: Material = { kind: 'linear', muR: 1 };

/** A saturating steel: B = mu0 H + 1.8 T x H/(H + 300 A/m), after Froehlich and Kennelly, at rows from 0 to 60 kA/m. */
export const STEEL: Material = {
  kind: 'curve',
  curve: buildBHCurve(
    Array.from({ length: 50 }, (_, i): [number, number] => {
      const strength = 40 * (1.16 ** i - 1);
      return [strength, 4e-7 * Math.PI * strength + (1.8 * strength) / (strength + 300)];
    }),
  ),
};

export const box = (name: string, x: number, y: number, width: number, height: number, maxEdge?: number): Region => ({
  name,
  shape: { kind: 'rectangle', from: [x, y], to: [x + width, y + height] },
  ...(maxEdge === undefined ? {} : { maxEdge }),
});

/** A C-shaped core with a gap of 4 mm at the right and two coils, out and back, round its left limb; closed all round. */
export const core: Section = {
  outline: { kind: 'rectangle', from: [0, 0], to: [0.16, 0.12] },
  background: 'air',
  maxEdge: 0.012,
  regions: [
    box('core', 0.04, 0.02, 0.08, 0.08),
    box('window', 0.06, 0.04, 0.04, 0.04),
    box('gap', 0.1, 0.058, 0.02, 0.004, 0.004),
    box('out', 0.03, 0.04, 0.01, 0.04),
    box('back', 0.06, 0.04, 0.008, 0.04),
    box('second out', 0.12, 0.075, 0.008, 0.02),
    box('second back', 0.092, 0.075, 0.008, 0.005),
  ],
};

/** The C core with current densities in A/m^2 by region. */
export function coreSetup(steel: Material, currentDensity: Readonly<Record<string, number>>): Setup {
  const air = ['window', 'gap', 'out', 'back', 'second out', 'second back', 'air'];
  return { materials: { core: steel, ...Object.fromEntries(air.map((name) => [name, AIR])) }, currentDensity };
}

/** Reads a field at places that are known to lie within it. */
export function readerOf(field: Field): (x: number, y: number) => FieldValue {
  const locator = buildLocator(field.mesh);
  return (x, y) => {
    const value = valueAt(field, locator, x, y);
    if (value === undefined) throw new Error(`(${x}, ${y}) lies outside`);
    return value;
  };
}

export const relativeError = (got: number, expected: number): number => Math.abs(got / expected - 1);
