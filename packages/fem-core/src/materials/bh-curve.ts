import { MU0 } from '../base/constants.js';
import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { CurvePoint } from './monotone-cubic.js';
import { evaluatePiece, integralsAtRows, monotoneSlopes, pieceOf } from './monotone-cubic.js';

/**
 * A magnetisation curve as H(B), odd in B: piecewise cubic through the rows of a table, going on with slope mu0 beyond
 * the last. Made by `buildBHCurve`.
 */
export interface BHCurve {
  /** Float64Array(k), T: rising, b[0] = 0. */
  readonly b: Float64Array;
  /** Float64Array(k), A/m: rising, h[0] = 0. */
  readonly h: Float64Array;
  /** Float64Array(k), m/H: dH/dB at the rows. */
  readonly slope: Float64Array;
  /** Float64Array(k), J/m^3: integral of H dB from 0 to each row. */
  readonly energy: Float64Array;
}

/**
 * Monotone piecewise cubic H(B): slopes at the rows by the weighted harmonic mean of the neighbouring chords, which keeps
 * every piece rising (Fritsch, Butland, A method for constructing local monotone piecewise cubic interpolants, 1984);
 * at the last row the slope is that of the parabola through the last three, within the bounds of monotony.
 *
 * @param rows  [H in A/m, B in T]; a first row [0, 0] is added where it is missing
 * @throws InputError for fewer than two rows, numbers that are not finite or negative, columns that do not both rise, and
 * segments flatter than mu0 (no material is)
 */
export function buildBHCurve(rows: readonly (readonly [H: number, B: number])[]): BHCurve {
  const faults = findTableFaults(rows);
  if (faults.length > 0) throw new InputError(faults);
  const all = rows[0][0] === 0 && rows[0][1] === 0 ? rows : [[0, 0] as const, ...rows];
  const h = Float64Array.from(all, (row) => row[0]);
  const b = Float64Array.from(all, (row) => row[1]);
  const slope = slopesOf(b, h);
  return { b, h, slope, energy: integralsAtRows(b, h, slope) };
}

/** Everything that `buildBHCurve` refuses in the rows [H in A/m, B in T]; `key` of a fault is `row N`, counted from 1. */
export function findTableFaults(rows: readonly (readonly [H: number, B: number])[]): Fault[] {
  const faults: Fault[] = [];
  const tell = (row: number, wrong: string, remedy: string): void => {
    faults.push({ code: 'bad-bh-table', key: `row ${row}`, wrong, remedy });
  };
  if (rows.length === 0 || (rows.length === 1 && rows[0][1] === 0)) {
    tell(1, 'the table has too few rows', 'give at least two rows [H in A/m, B in T] beyond [0, 0]');
  }
  let h0 = 0;
  let b0 = 0;
  rows.forEach(([h, b], i) => {
    if (!Number.isFinite(h) || !Number.isFinite(b)) {
      tell(i + 1, `holds a number that is not finite: [${h}, ${b}]`, 'give finite numbers');
    } else if (h < 0 || b < 0) {
      tell(i + 1, `is negative: [${h}, ${b}]`, 'give the first quadrant only');
    } else if (!(i === 0 && h === 0 && b === 0)) {
      if (h <= h0 || b <= b0) {
        tell(
          i + 1,
          `does not rise in both columns: [${h}, ${b}] after [${h0}, ${b0}]`,
          'order the rows so that H and B both rise',
        );
      } else if (b - b0 < 0.999 * MU0 * (h - h0)) {
        tell(
          i + 1,
          `rises less than vacuum would: [${h}, ${b}] after [${h0}, ${b0}]`,
          'check the units: H in A/m, B (not polarisation) in T',
        );
      }
    }
    if (Number.isFinite(h) && Number.isFinite(b)) [h0, b0] = [h, b];
  });
  return faults;
}

/** As `monotoneSlopes`, but at 0, where H(B) is odd: its chord over [-b1, b1] is the first; and never steeper than vacuum at the end. */
function slopesOf(b: Float64Array, h: Float64Array): Float64Array {
  const slope = monotoneSlopes(b, h);
  slope[0] = h[1] / b[1];
  slope[slope.length - 1] = Math.min(1 / MU0, slope[slope.length - 1]);
  return slope;
}

/** H, its slope and the energy at b >= 0 (T), beyond the last row with slope mu0; written into `out` and returned. */
export function evaluateCurve(curve: BHCurve, b: number, out: CurvePoint): CurvePoint {
  const last = curve.b.length - 1;
  if (b >= curve.b[last]) {
    const d = b - curve.b[last];
    out.h = curve.h[last] + d / MU0;
    out.slope = 1 / MU0;
    out.energy = curve.energy[last] + d * (curve.h[last] + (0.5 * d) / MU0);
    return out;
  }
  return evaluatePiece(curve.b, curve.h, curve.slope, curve.energy, pieceOf(curve.b, b), b, out);
}
