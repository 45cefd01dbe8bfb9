import { MU0 } from '@gapwright/fem-core';
import type { SectionProblem, SectionResult } from '@gapwright/machine-models';

/** Share of what there is of a kind that rounding may leave where there should be nothing. */
export const ROUNDING = 1e-12;

/** What rounding may leave of each kind of figure, in its unit. */
export interface Floors {
  /** Of A, flux and linkage, Wb/m. */
  readonly flux: number;
  /** T. */
  readonly density: number;
  /** A/m. */
  readonly strength: number;
  /** N/m. */
  readonly force: number;
  /** Nm/m. */
  readonly torque: number;
}

/** From the energy W per depth and the length l of the outline: B^2 l^2/(2 mu0) ~ W, A ~ B l, force ~ W/l, torque ~ W. */
export function roundingOf({ section: { outline } }: SectionProblem, result: SectionResult): Floors {
  const torque = ROUNDING * Math.max(Math.abs(result.energy_J_per_m), Math.abs(result.coenergy_J_per_m));
  if (Number.isNaN(torque)) return { flux: 0, density: 0, strength: 0, force: 0, torque: 0 };
  const length = lengthOf(outline);
  const flux = Math.sqrt(2 * MU0 * ROUNDING * torque);
  return { flux, density: flux / length, strength: flux / length / MU0, force: torque / length, torque };
}

function lengthOf(outline: SectionProblem['section']['outline']): number {
  if (outline.kind === 'circle') return 2 * outline.radius;
  const corners = outline.kind === 'polygon' ? outline.corners : [outline.from, outline.to];
  const spans = [0, 1].map((k) => {
    const along = corners.map((corner) => corner[k]);
    return Math.max(...along) - Math.min(...along);
  });
  return Math.max(...spans);
}

/** A figure is shown as 0 where the bound of its error is this many times as large. */
const LOST = 2;

/** True of what is nothing but mesh error or rounding; digits of it would tell nothing. */
export const isNought = (size: number, relative: number, floor: number): boolean =>
  Math.abs(size) < floor || (relative > LOST && Number.isFinite(relative));
