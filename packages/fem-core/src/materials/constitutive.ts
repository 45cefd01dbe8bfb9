import { MU0 } from '../base/constants.js';
import { unreachable } from '../base/unreachable.js';
import { evaluateCurve } from './bh-curve.js';
import { evaluateDemagnetisation, remanenceOfCurve } from './demagnetisation.js';
import { directionAt } from './direction.js';
import type { Material } from './material.js';
import type { CurvePoint } from './monotone-cubic.js';

/** H(B) at one place, its derivative, and the energy it stores. */
export interface LocalLaw {
  /** A/m. */
  hx: number;
  hy: number;
  /** dH/dB, m/H: dHx/dBx, dHx/dBy = dHy/dBx, dHy/dBy; positive definite. */
  xx: number;
  xy: number;
  yy: number;
  /** Chord reluctivity, m/H: H/B of steel, (H along)/(B along - Br) of a magnet; 1/(mu0 nu) is the relative permeability told. */
  nu: number;
  /** The same across the magnetisation of a magnet with a knee, where it is that of the recoil; else as `nu`. */
  nuAcross: number;
  /** J/m^3: integral of H dB from B = 0, of magnets from the remanence. */
  energy: number;
  /** Where a curve was last read: of steel, or of a magnet with a knee. */
  readonly curvePoint: CurvePoint;
}

export const newLaw = (): LocalLaw => ({
  hx: 0,
  hy: 0,
  xx: 0,
  xy: 0,
  yy: 0,
  nu: 0,
  nuAcross: 0,
  energy: 0,
  curvePoint: { h: 0, slope: 0, energy: 0 },
});

/**
 * Evaluates the material at flux density (bx, by) in T, at the place (x, y) in metres; writes into `out` and returns it.
 * The place matters to directed magnets alone.
 */
export function evaluateMaterial(
  material: Material,
  bx: number,
  by: number,
  x: number,
  y: number,
  out: LocalLaw,
): LocalLaw {
  switch (material.kind) {
    case 'linear':
      return isotropic(1 / (MU0 * material.muR), bx, by, out);
    case 'magnet':
      return isotropic(1 / (MU0 * material.recoil), bx - material.remanence[0], by - material.remanence[1], out);
    case 'directed-magnet':
      return directed(material, bx, by, x, y, out);
    case 'curve':
      return saturating(material, bx, by, out);
    default:
      return unreachable(material);
  }
}

/** H = nu (px, py), the part of B beyond the remanence. */
function isotropic(nu: number, px: number, py: number, out: LocalLaw): LocalLaw {
  out.hx = nu * px;
  out.hy = nu * py;
  out.xx = nu;
  out.xy = 0;
  out.yy = nu;
  out.nu = nu;
  out.nuAcross = nu;
  out.energy = 0.5 * nu * (px * px + py * py);
  return out;
}

/** H = nu(B) B:  dH/dB = nu I + spread B B^T,  spread = (dH/dB - H/B)/B^2. */
function saturating(material: Extract<Material, { kind: 'curve' }>, bx: number, by: number, out: LocalLaw): LocalLaw {
  const b = Math.sqrt(bx * bx + by * by);
  const point = evaluateCurve(material.curve, b, out.curvePoint);
  const small = b < 1e-9;
  const nu = small ? material.curve.slope[0] : point.h / b;
  const spread = small ? 0 : (point.slope - nu) / (b * b);
  out.hx = nu * bx;
  out.hy = nu * by;
  out.xx = nu + spread * bx * bx;
  out.xy = spread * bx * by;
  out.yy = nu + spread * by * by;
  out.nu = nu;
  out.nuAcross = nu;
  out.energy = point.energy;
  return out;
}

/** In the axes of the magnetisation H has the parts h(B along) and (B across)/(mu0 recoil); both are turned back. */
function directed(
  material: Extract<Material, { kind: 'directed-magnet' }>,
  bx: number,
  by: number,
  x: number,
  y: number,
  out: LocalLaw,
): LocalLaw {
  const angle = directionAt(material.direction, x, y);
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const along = c * bx + s * by;
  const across = c * by - s * bx;
  const nuAcross = 1 / (MU0 * material.recoil);
  let h: number;
  let nuAlong: number;
  let chord: number;
  let energy: number;
  if (typeof material.along === 'number') {
    h = nuAcross * (along - material.along);
    nuAlong = nuAcross;
    chord = nuAcross;
    energy = 0.5 * h * (along - material.along);
  } else {
    const point = evaluateDemagnetisation(material.along, along, out.curvePoint);
    const beyond = along - remanenceOfCurve(material.along);
    h = point.h;
    nuAlong = point.slope;
    chord = Math.abs(beyond) < 1e-9 ? nuAlong : h / beyond;
    energy = point.energy;
  }
  const hAcross = nuAcross * across;
  out.hx = c * h - s * hAcross;
  out.hy = s * h + c * hAcross;
  out.xx = c * c * nuAlong + s * s * nuAcross;
  out.xy = c * s * (nuAlong - nuAcross);
  out.yy = s * s * nuAlong + c * c * nuAcross;
  out.nu = chord;
  out.nuAcross = nuAcross;
  out.energy = energy + 0.5 * hAcross * across;
  return out;
}

/** Remanence vector at a place, T: the flux density at which H is zero; zero for all but magnets. */
export function remanenceAt(material: Material, x: number, y: number): readonly [x: number, y: number] {
  if (material.kind === 'magnet') return material.remanence;
  if (material.kind !== 'directed-magnet') return [0, 0];
  const { along, direction } = material;
  const size = typeof along === 'number' ? along : remanenceOfCurve(along);
  const angle = directionAt(direction, x, y);
  return [size * Math.cos(angle), size * Math.sin(angle)];
}
