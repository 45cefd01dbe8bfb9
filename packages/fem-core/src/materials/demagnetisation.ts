import { MU0 } from '../base/constants.js';
import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { CurvePoint } from './monotone-cubic.js';
import { pieceOf } from './monotone-cubic.js';

/**
 * Demagnetisation curve of a magnet along its easy axis, as H(B): straight between the rows, since recoil lines are, and
 * beyond them as in the first and the last piece. Made by `buildDemagnetisationCurve`.
 */
export interface DemagnetisationCurve {
  /** Float64Array(k), T: rising, the last row is the remanence. */
  readonly b: Float64Array;
  /** Float64Array(k), A/m: rising to 0 at the last row. */
  readonly h: Float64Array;
  /** Float64Array(k), J/m^3: integral of H dB from the remanence to each row. */
  readonly energy: Float64Array;
}

/**
 * The curve through the rows of a data sheet, straight between them.
 * @param rows  [H in A/m, B in T] from the remanence [0, Br] downwards (or the other way): H at most 0, B falling as H falls,
 * by mu0 |dH| at least; past the knee B may be negative
 * @throws InputError with everything wrong with the rows
 */
export function buildDemagnetisationCurve(rows: readonly (readonly [H: number, B: number])[]): DemagnetisationCurve {
  const faults = findDemagnetisationFaults(rows);
  if (faults.length > 0) throw new InputError(faults);
  const rising = [...rows].sort((p, q) => p[0] - q[0]);
  const h = Float64Array.from(rising, (row) => row[0]);
  const b = Float64Array.from(rising, (row) => row[1]);
  const energy = new Float64Array(b.length);
  for (let i = b.length - 2; i >= 0; i--) energy[i] = energy[i + 1] - 0.5 * (h[i] + h[i + 1]) * (b[i + 1] - b[i]);
  return { b, h, energy };
}

/**
 * Everything that `buildDemagnetisationCurve` refuses in the rows [H in A/m, B in T]; `key` of a fault is `row N`, counted from 1.
 */
export function findDemagnetisationFaults(rows: readonly (readonly [H: number, B: number])[]): Fault[] {
  const faults: Fault[] = [];
  const tell = (row: number, wrong: string, remedy: string): void => {
    faults.push({ code: 'bad-demagnetisation-curve', key: `row ${row}`, wrong, remedy });
  };
  if (rows.length < 2)
    tell(1, 'the curve has too few rows', 'give two rows [H in A/m, B in T] at least, the first [0, Br]');
  rows.forEach(([h, b], i) => {
    if (!Number.isFinite(h) || !Number.isFinite(b))
      tell(i + 1, `holds a number that is not finite: [${h}, ${b}]`, 'give finite numbers');
    else if (h > 0) tell(i + 1, `lies outside the second and third quadrants: [${h}, ${b}]`, 'give H at most 0');
  });
  if (faults.length > 0) return faults;
  const order = rows.map((_, i) => i).sort((p, q) => rows[q][0] - rows[p][0]);
  const [h0, b0] = rows[order[0]];
  if (h0 !== 0 || b0 <= 0) tell(order[0] + 1, `is no remanence: [${h0}, ${b0}]`, 'let one row be [0, Br]');
  for (let k = 1; k < order.length; k++) {
    const [h, b] = rows[order[k]];
    const [hAbove, bAbove] = rows[order[k - 1]];
    if (h >= hAbove || b >= bAbove) {
      tell(
        order[k] + 1,
        `does not fall in both columns: [${h}, ${b}] beside [${hAbove}, ${bAbove}]`,
        'let H and B fall together',
      );
    } else if (bAbove - b < 0.999 * MU0 * (hAbove - h)) {
      tell(
        order[k] + 1,
        `falls less than vacuum would: [${h}, ${b}] after [${hAbove}, ${bAbove}]`,
        'check the units: H in A/m, B (not polarisation) in T',
      );
    }
  }
  return faults;
}

/** Remanence of the curve, T. */
export const remanenceOfCurve = (curve: DemagnetisationCurve): number => curve.b[curve.b.length - 1];

/** Evaluates the curve at flux density b along the easy axis (T), energy from the remanence; writes into `out` and returns it. */
export function evaluateDemagnetisation(curve: DemagnetisationCurve, b: number, out: CurvePoint): CurvePoint {
  const i = pieceOf(curve.b, b);
  const d = b - curve.b[i];
  out.slope = (curve.h[i + 1] - curve.h[i]) / (curve.b[i + 1] - curve.b[i]);
  out.h = curve.h[i] + d * out.slope;
  out.energy = curve.energy[i] + d * 0.5 * (curve.h[i] + out.h);
  return out;
}
