import { MU0 } from '@gapwright/fem-core';
import type { LibraryMaterial } from '../machine.js';

/**
 * Magnets away from 20 degC. Remanence and intrinsic coercivity change in proportion to the temperature,
 *
 *   Br(T) = Br(20) (1 + a (T - 20)),  HcJ(T) = HcJ(20) (1 + b (T - 20)),
 *
 * as IEC 60404-8-1 and makers' tables state their coefficients (from memory). The coefficients are means over a span, often
 * 20 to 100 degC; outside it the truth bends away, coercivity most. What heat has demagnetised does not come back.
 */
export type Magnet = LibraryMaterial & { readonly kind: 'magnet' };

/** A working state on a demagnetisation curve: H in A/m, at most 0, and B in T. */
export interface CurvePlace {
  readonly h: number;
  readonly b: number;
}

/** Rows [H in A/m, B in T] from [0, Br] downwards. */
export type DemagnetisationRows = readonly (readonly [H: number, B: number])[];

const REFERENCE = 20;
const share = (slope: number, celsius: number): number => 1 + slope * (celsius - REFERENCE);

/** Remanence at a temperature in degC, T. */
export function remanenceAt(magnet: Magnet, celsius: number): number {
  return magnet.remanence * share(magnet.remanenceSlope, celsius);
}

/** Intrinsic coercivity at a temperature in degC, A/m; undefined where it is not known, or not how it changes from 20 degC. */
export function coercivityAt({ coercivityIntrinsic, coercivitySlope }: Magnet, celsius: number): number | undefined {
  if (coercivityIntrinsic === undefined) return undefined;
  if (coercivitySlope !== undefined) return coercivityIntrinsic * share(coercivitySlope, celsius);
  return celsius === REFERENCE ? coercivityIntrinsic : undefined;
}

/** What a temperature in degC leaves nothing of, by the straight laws: there the magnet is none any more. */
export function lostAt(magnet: Magnet, celsius: number): 'remanence' | 'coercivity' | undefined {
  if (share(magnet.remanenceSlope, celsius) <= 0) return 'remanence';
  return share(magnet.coercivitySlope ?? 0, celsius) <= 0 ? 'coercivity' : undefined;
}

/**
 * The demagnetisation curve at a temperature in degC.
 *
 * Where the material has a curve of its own (at 20 degC), its polarisation scales with the remanence and its field with the
 * intrinsic coercivity (unscaled where that slope is not known). Otherwise it is the recoil line B = Br + mu0 recoil H down
 * to H = -HcJ, where the polarisation breaks down: a loop of square corners; to B = 0 where HcJ is not known.
 */
export function demagnetisationAt(magnet: Magnet, celsius: number): DemagnetisationRows {
  const { demagnetisation, recoil, remanenceSlope, coercivitySlope = 0 } = magnet;
  const remanence = remanenceAt(magnet, celsius);
  if (demagnetisation === undefined) {
    const end = coercivityAt(magnet, celsius) ?? remanence / (MU0 * recoil);
    return [
      [0, remanence],
      [-end, remanence - MU0 * recoil * end],
    ];
  }
  return [...demagnetisation]
    .sort(([h1], [h2]) => h2 - h1)
    .map(([h, b]) => {
      const field = h * share(coercivitySlope, celsius);
      return [field, (b - MU0 * h) * share(remanenceSlope, celsius) + MU0 * field];
    });
}

/**
 * The knee of the demagnetisation curve at a temperature in degC: a magnet driven past it stays weaker.
 *
 * On a curve of the material's own, where it gets more than twice as steep as the recoil line; undefined if it ends before.
 * Otherwise the corner of the square loop, at H = -HcJ on the recoil line: the most a magnet of least coercivity can bear.
 * Real loops are round there: the polarisation has fallen by a tenth at 0.9 to 0.97 of HcJ in sintered NdFeB, less in
 * ferrite (practice, from memory), so keep a margin of a tenth at least. Undefined where HcJ is not known.
 */
export function kneeAt(magnet: Magnet, celsius: number): CurvePlace | undefined {
  const rows = demagnetisationAt(magnet, celsius);
  if (magnet.demagnetisation === undefined) {
    const [h, b] = rows[1];
    return coercivityAt(magnet, celsius) === undefined ? undefined : { h, b };
  }
  const steep = 2 * MU0 * magnet.recoil;
  const knee = rows.find(([h, b], i) => i + 1 < rows.length && b - rows[i + 1][1] > steep * (h - rows[i + 1][0]));
  return knee && { h: knee[0], b: knee[1] };
}

/** Field at which B is 0, A/m, positive: along the curve, or where its square loop breaks down before; undefined beyond its end. */
export function normalCoercivityAt(magnet: Magnet, celsius: number): number | undefined {
  const rows = demagnetisationAt(magnet, celsius);
  const below = rows.findIndex(([, b]) => b <= 0);
  if (below < 0) return magnet.demagnetisation === undefined ? -rows[1][0] : undefined;
  const [[h1, b1], [h2, b2]] = [rows[below - 1], rows[below]];
  return -(h1 + ((h2 - h1) * b1) / (b1 - b2));
}

/**
 * Largest energy product -B H along the curve, J/m^3; for a straight line down to B = 0 it is Br^2 / (4 mu0 recoil) (any
 * text on magnets). 1 MGOe = 7957.7 J/m^3.
 */
export function energyProductAt(magnet: Magnet, celsius: number): number {
  const rows = demagnetisationAt(magnet, celsius);
  return rows.slice(1).reduce((most, [h2, b2], i) => {
    const [h1, b1] = rows[i];
    const slope = (b1 - b2) / (h1 - h2);
    const h = Math.max(h2, Math.min(h1, (slope * h1 - b1) / (2 * slope)));
    return Math.max(most, -h * (b1 + slope * (h - h1)));
  }, 0);
}

/** degC: below it, magnets that lose coercivity in the cold are spoken of. */
const COLD = 0;

/** What to know of a magnet at a temperature in degC: above the usual limit, or in the cold with ferrite. */
export function temperatureWarning(magnet: Magnet, celsius: number): string | undefined {
  const { highestTemperature, coercivitySlope = 0 } = magnet;
  const shown = Number(celsius.toFixed(1));
  if (highestTemperature !== undefined && celsius > highestTemperature) {
    return (
      `${shown} degC is above the usual limit of ${highestTemperature} degC, which itself holds only for thick magnets in a ` +
      'good circuit: take a grade made for it, or hold the working point against the knee'
    );
  }
  if (coercivitySlope > 0 && celsius < COLD) {
    const left = Math.round(100 * share(coercivitySlope, celsius));
    return `at ${shown} degC ${left} % of the coercivity is left: such magnets demagnetise in the cold, judge them there`;
  }
  return undefined;
}
