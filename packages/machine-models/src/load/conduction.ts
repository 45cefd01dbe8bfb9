import { combine, type Series } from '../waves/series.js';
import { type Star, throughImpedance } from './source.js';

/**
 * What flows in a three-phase diode bridge between two switching instants, in closed form.
 *
 * The machine is a star of EMFs e_k (adding to nought) behind R and X = omega L; the DC side is a voltage V behind a
 * resistance D (either may be 0); a diode that conducts drops a fixed voltage, so two of them add to V. Between the rails
 * lies then U = V + D i_dc. Theta is the electrical angle, ' the derivative by it. Phases a, b, c stand in cyclic order.
 *
 *   none     no current
 *   pair     c idle, a at the rail of sign s, b at the other; z = i_a = -i_b:
 *              2 X z' + (2 R + D) z = e_a - e_b - s V
 *   triple   c alone at the rail of sign s, a and b at the other; w = i_c, y = i_a - i_b:
 *              (3/2) X w' + ((3/2) R + D) w = (3/2) e_c - s V
 *              X y' + R y = e_a - e_b
 *
 * Each is one equation in one unknown: a steady answer by harmonics, a constant, and what dies away exponentially.
 */
export interface Circuit {
  /**
   * V: DC voltage and two diodes. With a large resistance a negative one makes a source of constant current, as long as U
   * stays above nought.
   */
  readonly voltage: number;
  /** Of the DC side, ohm. */
  readonly dcResistance: number;
  /** R and X, ohm. */
  readonly resistance: number;
  readonly reactance: number;
  readonly symmetric: boolean;
  /** Highest order of the EMFs that is not faint. */
  readonly highest: number;
  /** Largest EMF over impedance, A: what currents are small against. */
  readonly scale: number;
  /** Steady waves of a state's two quantities, see `Flow`: e_1, e_2; z, e_c by c; w, y by c. */
  readonly waves: {
    readonly none: WavePair;
    readonly pair: readonly WavePair[];
    readonly triple: readonly WavePair[];
  };
}

/** Two waves of the same orders: cosine and sine coefficients of the one, then of the other, order by order. */
interface WavePair {
  readonly order: readonly number[];
  readonly coefficients: Float64Array;
}

export interface State {
  readonly kind: 'none' | 'pair' | 'triple';
  /** c above: the idle phase of a pair, the lone one of a triple. */
  readonly phase: number;
  /** s above. */
  readonly sign: 1 | -1;
}

/** One state from an instant on. */
export interface Flow {
  readonly state: State;
  readonly from: number;
  /** Steady waves of the two quantities: e_1, e_2 | z, e_c | w, y. */
  readonly waves: WavePair;
  /** What dies away: amplitudes at `from` and rates by angle; `settled` is where the first one's constant part goes. */
  readonly settled: number;
  readonly first: number;
  readonly firstRate: number;
  readonly second: number;
  readonly secondRate: number;
}

/** Share of the largest harmonic below which one does not shorten the steps in which a period is looked through. */
const FAINT = 1e-6;

export function bridgeCircuit(star: Star, voltage: number, dcResistance: number): Circuit {
  const { emf, order, reactance } = star;
  const resistance = star.windingResistance + star.cableResistance;
  const through = (series: Series, r: number): Series => throughImpedance(series, r, reactance);
  const difference = (c: number): Series => combine([emf[(c + 1) % 3], emf[(c + 2) % 3]], [1, -1]);
  const sizes = order.map((_, i) => Math.max(...emf.map(({ cos, sin }) => Math.hypot(cos[i], sin[i]))));
  const largest = Math.max(...sizes);
  return {
    voltage,
    dcResistance,
    resistance,
    reactance,
    symmetric: star.symmetric,
    highest: Math.max(1, ...order.filter((_, i) => sizes[i] > FAINT * largest)),
    scale: largest / Math.hypot(resistance, reactance),
    waves: {
      none: wavePair(emf[0], emf[1]),
      pair: [0, 1, 2].map((c) =>
        wavePair(through(combine([difference(c)], [0.5]), resistance + dcResistance / 2), emf[c]),
      ),
      triple: [0, 1, 2].map((c) =>
        wavePair(through(emf[c], resistance + (2 * dcResistance) / 3), through(difference(c), resistance)),
      ),
    },
  };
}

function wavePair(one: Series, other: Series): WavePair {
  const coefficients = Float64Array.from(
    one.order.flatMap((_, i) => [one.cos[i], one.sin[i], other.cos[i], other.sin[i]]),
  );
  return { order: one.order, coefficients };
}

/** The two waves and their derivatives: out = [f, f', g, g']. */
function evaluatePair({ order, coefficients }: WavePair, theta: number, out: Float64Array): Float64Array {
  const stepCos = Math.cos(2 * theta);
  const stepSin = Math.sin(2 * theta);
  let [previous, c, s] = [Number.NaN, 0, 0];
  let [f, fSlope, g, gSlope] = [0, 0, 0, 0];
  for (let i = 0; i < order.length; i++) {
    const n = order[i];
    if (n === previous + 2) {
      const turned = c * stepCos - s * stepSin;
      s = s * stepCos + c * stepSin;
      c = turned;
    } else {
      c = Math.cos(n * theta);
      s = Math.sin(n * theta);
    }
    previous = n;
    f += coefficients[4 * i] * c + coefficients[4 * i + 1] * s;
    fSlope += n * (coefficients[4 * i + 1] * c - coefficients[4 * i] * s);
    g += coefficients[4 * i + 2] * c + coefficients[4 * i + 3] * s;
    gSlope += n * (coefficients[4 * i + 3] * c - coefficients[4 * i + 2] * s);
  }
  out[0] = f;
  out[1] = fSlope;
  out[2] = g;
  out[3] = gSlope;
  return out;
}

/** The state entered at an instant with the currents (A, of the three phases) that flow there. */
export function startFlow(circuit: Circuit, state: State, from: number, currents: ArrayLike<number>): Flow {
  const { resistance, reactance, dcResistance, voltage } = circuit;
  const { kind, phase: c, sign } = state;
  if (kind === 'none') {
    return { state, from, waves: circuit.waves.none, settled: 0, first: 0, firstRate: 0, second: 0, secondRate: 0 };
  }
  const waves = circuit.waves[kind][c];
  const [f, , g] = evaluatePair(waves, from, new Float64Array(4));
  const [a, b] = [(c + 1) % 3, (c + 2) % 3];
  const total = kind === 'pair' ? 2 * resistance + dcResistance : 1.5 * resistance + dcResistance;
  const shared = { state, from, waves, settled: (-sign * voltage) / total };
  return kind === 'pair'
    ? { ...shared, first: currents[a] - f, firstRate: total / (2 * reactance), second: 0, secondRate: 0 }
    : {
        ...shared,
        first: currents[c] - f,
        firstRate: total / (1.5 * reactance),
        second: currents[a] - currents[b] - g,
        secondRate: resistance / reactance,
      };
}

/** The flow's two quantities and their derivatives by angle: out = [f, f', g, g']. Rates are infinite where X = 0. */
export function evaluateFlow(flow: Flow, theta: number, out: Float64Array): Float64Array {
  evaluatePair(flow.waves, theta, out);
  if (flow.state.kind === 'none') return out;
  const { settled, first, firstRate, second, secondRate } = flow;
  const passed = theta - flow.from;
  if (firstRate === Number.POSITIVE_INFINITY) {
    out[0] += settled;
    return out;
  }
  const left = Math.exp(-firstRate * passed);
  out[0] += first * left - settled * Math.expm1(-firstRate * passed);
  out[1] += firstRate * (settled - first) * left;
  if (second !== 0) {
    const secondLeft = second * Math.exp(-secondRate * passed);
    out[2] += secondLeft;
    out[3] -= secondRate * secondLeft;
  }
  return out;
}

/** Currents of the three phases, A, from a flow's quantities. */
export function currentsOf({ kind, phase: c }: State, quantities: Float64Array, out: Float64Array): Float64Array {
  const f = quantities[0];
  const g = quantities[2];
  const a = (c + 1) % 3;
  const b = (c + 2) % 3;
  out[a] = kind === 'none' ? 0 : kind === 'pair' ? f : (g - f) / 2;
  out[b] = kind === 'none' ? 0 : kind === 'pair' ? -f : (-g - f) / 2;
  out[c] = kind === 'triple' ? f : 0;
  return out;
}

/** Current out of the positive rail, A. */
export function railCurrent({ kind, sign }: State, quantities: Float64Array): number {
  return kind === 'none' ? 0 : sign * quantities[0];
}

/** EMFs of the three phases, V: the first three of `out`, which has room for four. */
export function emfAt({ waves }: Circuit, theta: number, out: Float64Array): Float64Array {
  evaluatePair(waves.none, theta, out);
  out[1] = out[2];
  out[2] = -out[0] - out[1];
  return out;
}
