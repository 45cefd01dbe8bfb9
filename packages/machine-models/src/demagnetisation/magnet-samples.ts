import type { Field } from '@gapwright/fem-core';
import { MU0 } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';

/** The quadrature points of one magnet of a section, n of them, in the order of the mesh. */
export interface MagnetSamples {
  /** Of the section: `upper magnet`, `upper interpole`, ... */
  readonly region: string;
  /** Float64Array(n) each: place, m, and area, m^2. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly area: Float64Array;
  /** Float64Array(n): flux density along the magnetisation, T. */
  readonly along: Float64Array;
  /** Direction of the magnetisation, of length 1. */
  readonly direction: readonly [x: number, y: number];
  /** T. */
  readonly remanence: number;
  /** Relative. */
  readonly recoil: number;
}

/** @throws Error for regions that are no magnets of one direction */
export function magnetSamples(field: Field, region: string): MagnetSamples {
  const material = field.setup.materials[region];
  if (material?.kind !== 'magnet') throw new Error(`${region} is no magnet of one direction`);
  const [mx, my] = material.remanence;
  const remanence = Math.hypot(mx, my);
  const direction = [mx / remanence, my / remanence] as const;
  const [x, y, area, along]: number[][] = [[], [], [], []];
  forEachSample(field, [region], (sample) => {
    x.push(sample.x);
    y.push(sample.y);
    area.push(sample.area);
    along.push(direction[0] * sample.bx + direction[1] * sample.by);
  });
  return {
    region,
    x: Float64Array.from(x),
    y: Float64Array.from(y),
    area: Float64Array.from(area),
    along: Float64Array.from(along),
    direction,
    remanence,
    recoil: material.recoil,
  };
}

/** H along the magnetisation of B along it, A/m: (B - Br)/(mu0 recoil). */
export const fieldStrength = ({ remanence, recoil }: MagnetSamples, along: number): number =>
  (along - remanence) / (MU0 * recoil);

/** Where a magnet works. */
export interface WorkingPoint {
  /** Along the magnetisation, T: lower in 1 % of the area. */
  readonly b: number;
  /** Along the magnetisation, A/m. */
  readonly h: number;
  /** Where it is lowest of all, m. */
  readonly x: number;
  readonly y: number;
}

/** Share of the area that may lie lower: corners are singular, so a least value means nothing. */
const SHARE = 0.01;

/**
 * The worst hundredth of a magnet's area.
 *
 * @param along  flux density along the magnetisation at the samples, T
 */
export function worstPoint(samples: MagnetSamples, along: Float64Array = samples.along): WorkingPoint {
  const { area, x, y } = samples;
  const rising = Array.from(along, (_, i) => i).sort((i, j) => along[i] - along[j]);
  const whole = area.reduce((sum, part) => sum + part, 0);
  let passed = 0;
  const at = rising.find((i) => {
    passed += area[i];
    return passed >= SHARE * whole;
  });
  const lowest = rising[0];
  const b = along[at ?? lowest];
  return { b, h: fieldStrength(samples, b), x: x[lowest], y: y[lowest] };
}
