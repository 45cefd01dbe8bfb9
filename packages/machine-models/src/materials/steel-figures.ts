import { buildBHCurve, MU0 } from '@gapwright/fem-core';
import { evaluateCurve } from '@gapwright/fem-core/materials';
import type { BhTable } from './steel-tables.js';

/** What a B-H table tells in a few figures. */
export interface SteelFigures {
  /** Relative permeability B / (mu0 H) of the first row. */
  readonly initialPermeability: number;
  /** The highest of the rows', and the flux density there, T. */
  readonly highestPermeability: number;
  readonly atFlux: number;
  /** The last row: H in A/m, B and polarisation J = B - mu0 H in T; beyond it J stays. */
  readonly lastField: number;
  readonly lastFlux: number;
  readonly lastPolarisation: number;
}

/** @param bh  as `buildBHCurve` takes it, two rows at least */
export function steelFigures(bh: BhTable): SteelFigures {
  const rows = bh.filter(([h]) => h > 0).map(([h, b]) => ({ flux: b, permeability: b / (MU0 * h) }));
  const best = rows.reduce((most, row) => (row.permeability > most.permeability ? row : most));
  const [lastField, lastFlux] = bh[bh.length - 1];
  return {
    initialPermeability: rows[0].permeability,
    highestPermeability: best.permeability,
    atFlux: best.flux,
    lastField,
    lastFlux,
    lastPolarisation: lastFlux - MU0 * lastField,
  };
}

/** Places along the curve as the solver takes it, `count` equal steps of B after 0 up to the last row: [H in A/m, B in T]. */
export function sampleCurve(bh: BhTable, count: number): BhTable {
  const curve = buildBHCurve(bh);
  const last = curve.b[curve.b.length - 1];
  const point = { h: 0, slope: 0, energy: 0 };
  return Array.from({ length: count }, (_, i) => {
    const flux = ((i + 1) / count) * last;
    return [evaluateCurve(curve, flux, point).h, flux];
  });
}
