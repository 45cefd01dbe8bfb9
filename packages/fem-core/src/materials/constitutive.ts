import { MU0 } from '../base/constants.js';
import { unreachable } from '../base/unreachable.js';
import type { CurvePoint } from './bh-curve.js';
import { evaluateCurve } from './bh-curve.js';
import type { Material } from './material.js';

/**
 * H(B) at one place, as a tensor law: H = nu (B - remanence), dH = nu dB + spread B (B . dB).
 * `energy` is the density the field stores: linear B^2/(2 mu), curve integral of H dB, magnet (B - Br)^2/(2 mu).
 */
export interface LocalLaw {
  /** m/H. */
  nu: number;
  /** d nu/d(B^2) times two, m/(H T^2); 0 for linear materials. */
  spread: number;
  /** J/m^3. */
  energy: number;
}

const scratch: CurvePoint = { h: 0, slope: 0, energy: 0 };

/** Evaluates the material at flux density (bx, by) in T; writes into `out` and returns it. */
export function evaluateMaterial(material: Material, bx: number, by: number, out: LocalLaw): LocalLaw {
  switch (material.kind) {
    case 'linear':
      out.nu = 1 / (MU0 * material.muR);
      out.spread = 0;
      out.energy = 0.5 * out.nu * (bx * bx + by * by);
      return out;
    case 'magnet': {
      const [rx, ry] = material.remanence;
      out.nu = 1 / (MU0 * material.recoil);
      out.spread = 0;
      out.energy = 0.5 * out.nu * ((bx - rx) ** 2 + (by - ry) ** 2);
      return out;
    }
    case 'curve': {
      const b = Math.hypot(bx, by);
      evaluateCurve(material.curve, b, scratch);
      out.energy = scratch.energy;
      if (b < 1e-9) {
        out.nu = material.curve.slope[0];
        out.spread = 0;
      } else {
        out.nu = scratch.h / b;
        out.spread = (scratch.slope - out.nu) / (b * b); // 2 d nu/d(B^2) = (dH/dB - H/B)/B^2
      }
      return out;
    }
    default:
      return unreachable(material);
  }
}

/** Remanence vector of the material, T; zero for all but magnets. */
export function remanenceOf(material: Material): readonly [x: number, y: number] {
  return material.kind === 'magnet' ? material.remanence : [0, 0];
}
