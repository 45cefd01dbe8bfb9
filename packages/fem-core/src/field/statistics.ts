import type { Field } from './field.js';
import { forEachSample } from './integrals.js';

/** What losses and designers ask of the flux density in a region. */
export interface FieldStatistics {
  /** m^2. */
  readonly area: number;
  /** Largest |B| at any quadrature point, T: grows with the mesh at sharp corners. */
  readonly peak: number;
  /** |B| exceeded in a hundredth of the area, T: the peak a designer can use. */
  readonly peakInNinetyNine: number;
  /** Mean of |B| over the area, T. */
  readonly mean: number;
  /** Mean of Bx^2 over the area, T^2. */
  readonly meanSquareX: number;
  /** Mean of By^2 over the area, T^2. */
  readonly meanSquareY: number;
  /** Mean of |B|^2 over the area, T^2: eddy and hysteresis losses go with it. */
  readonly meanSquare: number;
}

/** Statistics of the flux density over the named regions together; of no area, all figures but the area are NaN. */
export function fieldStatistics(field: Field, regions: readonly string[]): FieldStatistics {
  const spread = sizesOf(field, regions);
  let [xx, yy, mean] = [0, 0, 0];
  forEachSample(field, regions, (s) => {
    mean += s.area * Math.hypot(s.bx, s.by);
    xx += s.area * s.bx * s.bx;
    yy += s.area * s.by * s.by;
  });
  const { area } = spread;
  return {
    area,
    peak: spread.falling.length === 0 ? Number.NaN : spread.falling[0].b,
    peakInNinetyNine: area === 0 ? Number.NaN : exceededBy(spread, 0.01),
    mean: mean / area,
    meanSquareX: xx / area,
    meanSquareY: yy / area,
    meanSquare: (xx + yy) / area,
  };
}

/**
 * Flux density that |B| exceeds in the given share of the regions' area, T: corners are singular, so a maximum means nothing.
 * @param share  from 0 to 1
 */
export function exceededIn(field: Field, regions: readonly string[], share: number): number {
  return exceededBy(sizesOf(field, regions), share);
}

/** |B| at all quadrature points, falling, each with its share of the area. */
interface Sizes {
  readonly falling: readonly { readonly b: number; readonly area: number }[];
  readonly area: number;
}

function sizesOf(field: Field, regions: readonly string[]): Sizes {
  const falling: { b: number; area: number }[] = [];
  let area = 0;
  forEachSample(field, regions, (s) => {
    falling.push({ b: Math.hypot(s.bx, s.by), area: s.area });
    area += s.area;
  });
  falling.sort((p, q) => q.b - p.b);
  return { falling, area };
}

function exceededBy({ falling, area }: Sizes, share: number): number {
  let passed = 0;
  for (const part of falling) {
    passed += part.area;
    if (passed >= share * area) return part.b;
  }
  return falling.at(-1)?.b ?? 0; // the whole area, but for rounding
}
