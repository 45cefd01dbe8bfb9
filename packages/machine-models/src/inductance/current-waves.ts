import type { Machine, Winding } from '../machine.js';
import type { CoilPlace } from '../winding/coil-places.js';
import { coilPlaces, STARS } from '../winding/coil-places.js';
import { legCut } from '../winding/leg-cut.js';

/**
 * How the coils of the phases add up in the wave exp(i m theta): with S_a = sum over the coils of phase a of
 * sense exp(-i m axis),
 */
export interface CoilProducts {
  /** Mean over the phases of |S_a|^2. */
  readonly self: number;
  /** Mean over the pairs of different phases of one star of Re(conj(S_a) S_b). */
  readonly mutual: number;
  /** The same of the first phase and the next of its star. */
  readonly next: number;
}

/** A wave whose coils add up to less than this share of their number is none: rounding. */
const NOTHING = 1e-9;

/** The coils' products for m = 0, 1, ...; they repeat with m, as the axes lie on a grid of even places round the shaft. */
export function coilProducts(winding: Winding, poles: number): readonly CoilProducts[] {
  const places = coilPlaces(winding, poles);
  const grid = winding.layout === 'concentrated' ? winding.coils : 2 * winding.phases * poles;
  const pairs = STARS[winding.phases].flatMap((star) => star.flatMap((a) => star.map((b) => [a, b] as const)));
  const different = pairs.filter(([a, b]) => a !== b);
  const [first, second] = STARS[winding.phases][0];
  return phaseSums(places, grid).map((at) => {
    const self = mean(at.map(({ re, im }) => re * re + im * im));
    if (self <= (NOTHING * places.length) ** 2) return { self: 0, mutual: 0, next: 0 };
    const product = (a: number, b: number): number => at[a].re * at[b].re + at[a].im * at[b].im;
    return { self, mutual: mean(different.map(([a, b]) => product(a, b))), next: product(first, second) };
  });
}

/**
 * One wave of the phases' currents round the circumference, exp(i m theta) with m = 1, 2, ... mechanical.
 *
 * The conductors of phase a with one turn a leg, per metre of circumference and + where they run out of the page, are
 * n_a(x) = sum over all m of c_am exp(i m x/r), each leg's turn spread evenly over its width. `self`, `mutual` and `next` are
 * those of `CoilProducts` with sqrt(2) c_am in place of S_a (m and -m together), 1/m^2.
 */
export interface CurrentWave extends CoilProducts {
  /** m. */
  readonly order: number;
}

/** Waves are followed to so many times the number of legs or poles, and so many legs' widths. Their sum goes as 1/m^4. */
const REACH = 40;
const LEG_REACH = 6;

/**
 * The waves of a machine's winding at a radius, by rising order, those that cancel left out. Coils: leg at the smaller angle
 * out of the page, that at the larger into it, for sense +1.
 *
 *   c_am = (1/P) (sin(s)/s) 2i sin(m h) S_a,   s = m b/(2 r),   P = 2 pi r
 *
 * with b the leg's width along the circumference and h half the coil's span.
 */
export function currentWaves({ winding, rotor }: Machine, radius: number): readonly CurrentWave[] {
  const { poles, magnets } = rotor;
  const { halfSpan, width } = legCut(winding, poles, magnets.meanRadius, radius);
  const products = coilProducts(winding, poles);
  const legs = Math.max(poles, 2 * winding.coils);
  const highest = Math.ceil(Math.max(REACH * legs, (LEG_REACH * 2 * Math.PI * radius) / width));
  const waves: CurrentWave[] = [];
  for (let order = 1; order <= highest; order++) {
    const { self, mutual, next } = products[order % products.length];
    if (self === 0) continue;
    const spread = (order * width) / (2 * radius);
    const leg = ((Math.sin(spread) / spread) * Math.sin(order * halfSpan)) / (Math.PI * radius);
    const share = 2 * leg * leg;
    waves.push({ order, self: share * self, mutual: share * mutual, next: share * next });
  }
  return waves;
}

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

interface Complex {
  re: number;
  im: number;
}

/**
 * S by m and phase, m = 0 ... grid - 1.
 */
function phaseSums(places: readonly CoilPlace[], grid: number): readonly (readonly Complex[])[] {
  const turn = (2 * Math.PI) / grid;
  const cos = Array.from({ length: grid }, (_, i) => Math.cos(i * turn));
  const sin = Array.from({ length: grid }, (_, i) => Math.sin(i * turn));
  const at = places.map(({ axis }) => Math.round(axis / turn));
  const phases = Math.max(...places.map(({ phase }) => phase));
  return Array.from({ length: grid }, (_, m) => {
    const sums = Array.from({ length: phases }, (): Complex => ({ re: 0, im: 0 }));
    places.forEach(({ phase, sense }, i) => {
      const angle = (m * at[i]) % grid;
      sums[phase - 1].re += sense * cos[angle];
      sums[phase - 1].im -= sense * sin[angle];
    });
    return sums;
  });
}
