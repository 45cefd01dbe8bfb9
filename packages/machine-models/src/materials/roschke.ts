import { MU0 } from '@gapwright/fem-core';

/** Parameters of Roschke's fit of a soft magnetic material; see `roschkeTable`. */
export interface RoschkeFit {
  readonly initial: number;
  /** T: flux density at the highest permeability, about. */
  readonly bMax: number;
  readonly ca: number;
  readonly cb: number;
  readonly n: number;
}

/** Step of the table and where it ends at the latest, T: the fits are meant for up to about 2 T. */
const STEP = 0.05;
const LAST = 2.55;

/**
 * Rows [H in A/m, B in T] of the fit
 *
 *   mu_r(B) = 1 + (initial - 1 + ca b) / (1 + cb b + b^n),  b = B / bMax,  H = B / (mu0 mu_r)
 *
 * at 0, 0.02 and every 0.05 T up to 2.55 T, but no further than the highest polarisation J = B - mu0 H: past it the
 * formula lets J fall, which no material does. Whoever uses the table goes on with slope mu0, which is that of the peak.
 *
 * Source: T. Roschke, dissertation, Dresden 2000, as credited by the Modelica Standard Library (BSD-3-Clause), flux tubes,
 * soft magnetic materials, from which the parameters come.
 */
export function roschkeTable(fit: RoschkeFit): readonly (readonly [H: number, B: number])[] {
  const rows: [number, number][] = [[0, 0]];
  let polarisation = 0;
  for (let i = 0; i * STEP <= LAST + STEP / 2; i++) {
    const flux = i === 0 ? 0.02 : Math.round(i * STEP * 100) / 100;
    const field = fieldStrength(fit, flux);
    if (flux - MU0 * field <= polarisation) break;
    polarisation = flux - MU0 * field;
    rows.push([field, flux]);
  }
  return rows;
}

function fieldStrength({ initial, bMax, ca, cb, n }: RoschkeFit, flux: number): number {
  const b = flux / bMax;
  return flux / (MU0 * (1 + (initial - 1 + ca * b) / (1 + cb * b + b ** n)));
}
