import { MU0 } from '@gapwright/fem-core';
import type { LibraryMaterial, Machine } from '../machine.js';

/**
 * How well the plates mirror the field: 1 as planes of endless permeability do, 0 not at all. The image of a wave k in a
 * plate of permeability m and thickness t, air behind it:
 *
 *   (m^2 - 1) sinh(k t) / ((m^2 + 1) sinh(k t) + 2 m cosh(k t))      (potential in three layers; textbook)
 *
 * with the permeability midway between poles, where the disc is most saturated and all its flux must pass. Of discs that
 * saturate, hut hydro's at 1 and 3 mm, the slices' own fundamental shows 0.23 and 0.62 of what ideal discs add; this says
 * 0.3 and 0.7.
 */
export interface Mirrors {
  readonly disc: number;
  readonly keeper: number;
}

/**
 * @param discB  mean flux density in the disc midway between two poles, T, by the slices; where it is not known, steel is
 * taken as far from saturation
 */
export function plateMirrors(machine: Machine, discB: number | undefined): Mirrors {
  const { rotor, materials } = machine;
  const k = rotor.poles / (2 * rotor.magnets.meanRadius);
  const mirror = (plate: { readonly material: string; readonly thickness: number } | undefined): number =>
    plate === undefined ? 0 : imageShare(permeability(materials[plate.material], discB), k * plate.thickness);
  return { disc: mirror(rotor.disc), keeper: mirror(rotor.keeper) };
}

function imageShare(m: number, kt: number): number {
  const tanh = Math.tanh(kt);
  return ((m * m - 1) * tanh) / ((m * m + 1) * tanh + 2 * m);
}

/** Where no solution tells, T. */
const UNSATURATED = 1;

/** Relative permeability B/(mu0 H). */
function permeability(material: LibraryMaterial, discB: number | undefined): number {
  if (material.kind === 'steel') return material.muR;
  if (material.kind !== 'steel-curve') return 1;
  const b = discB ?? UNSATURATED;
  const { bh } = material;
  const above = bh.findIndex(([, rowB]) => rowB >= b);
  if (above === 0) return permeability(material, undefined);
  const [[h1, b1], [h2, b2]] = above < 0 ? [bh[bh.length - 1], beyond(bh[bh.length - 1])] : [bh[above - 1], bh[above]];
  const h = h1 + ((b - b1) / (b2 - b1)) * (h2 - h1);
  return h === 0 ? 1e6 : b / (MU0 * h);
}

/** The curve goes on with slope mu0. */
const beyond = ([h, b]: readonly [H: number, B: number]): readonly [H: number, B: number] => [h + 1 / MU0, b + 1];
