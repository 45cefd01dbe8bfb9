import { type Circuit, currentsOf, evaluateFlow, type Flow, railCurrent, type State } from './conduction.js';

/**
 * When and how a bridge changes from one state to the next. A guard is a quantity that is negative as long as nothing
 * changes; the state ends where the first one passes nought upwards. U as in `Circuit`:
 *
 *   none     e_i - e_j - V             of all pairs: i and j begin to conduct
 *   pair     -s z                      the current ends
 *            e_c - U/3, -e_c - U/3     the idle phase stands above the upper rail, or below the lower one, and joins
 *   triple   s i_a, s i_b              that phase's current ends. It goes straight to the other rail if s e > U/3,
 *                                      else it is idle
 */
const MOST_GUARDS = 6;

/** What ended a state. */
export interface Switching {
  readonly at: number;
  readonly guard: number;
}

/** Smallest angle that is looked at after a change; from there on the look-out widens twofold to the regular step. */
const FIRST_STEP = 1e-5;

/** Values and slopes of a flow's guards at an angle: value of guard k at 2k, slope at 2k + 1. Returns how many there are. */
function guardsOf(circuit: Circuit, flow: Flow, theta: number, scratch: Float64Array, out: Float64Array): number {
  evaluateFlow(flow, theta, scratch);
  const f = scratch[0]; // by index: taking a typed array apart walks an iterator, many times slower
  const fSlope = scratch[1];
  const g = scratch[2];
  const gSlope = scratch[3];
  const { kind, sign } = flow.state;
  const { voltage, dcResistance } = circuit;
  const put = (k: number, value: number, slope: number): void => {
    out[2 * k] = value;
    out[2 * k + 1] = slope;
  };
  switch (kind) {
    case 'none': {
      put(0, f - g - voltage, fSlope - gSlope);
      put(1, g - f - voltage, gSlope - fSlope);
      put(2, 2 * g + f - voltage, 2 * gSlope + fSlope);
      put(3, -2 * g - f - voltage, -2 * gSlope - fSlope);
      put(4, -2 * f - g - voltage, -2 * fSlope - gSlope);
      put(5, 2 * f + g - voltage, 2 * fSlope + gSlope);
      return 6;
    }
    case 'pair': {
      const third = (voltage + dcResistance * sign * f) / 3;
      const thirdSlope = (dcResistance * sign * fSlope) / 3;
      put(0, -sign * f, -sign * fSlope);
      put(1, g - third, gSlope - thirdSlope);
      put(2, -g - third, -gSlope - thirdSlope);
      return 3;
    }
    case 'triple': {
      put(0, (sign * (g - f)) / 2, (sign * (gSlope - fSlope)) / 2);
      put(1, (sign * (-g - f)) / 2, (sign * (-gSlope - fSlope)) / 2);
      return 2;
    }
  }
}

/** Pairs of the guards of `none`, as the idle phase and the sign of the one after it. */
const STARTS: readonly State[] = [0, 1, 2, 3, 4, 5].map((guard) => ({
  kind: 'pair',
  phase: [2, 0, 1][Math.floor(guard / 2)],
  sign: guard % 2 === 0 ? 1 : -1,
}));

/**
 * The first switching of a flow before `until`, or undefined. Guards are looked at in steps that start small and grow to
 * `step`, which must be well below the wavelength of the highest order; a guard that rises and falls again between two
 * looks is found by its slopes. Instants are exact to rounding.
 *
 * @param patient what already stands above nought at the start is passed over: for states that rounding makes to and fro
 */
export function nextSwitching(
  circuit: Circuit,
  flow: Flow,
  until: number,
  step: number,
  patient: boolean,
): Switching | undefined {
  const scratch = new Float64Array(4);
  const [before, after, between] = [0, 1, 2].map(() => new Float64Array(2 * MOST_GUARDS));
  const look = (theta: number, out: Float64Array): number => guardsOf(circuit, flow, theta, scratch, out);
  const height = (k: number) => (theta: number) => {
    look(theta, between);
    return { value: between[2 * k], slope: between[2 * k + 1] };
  };
  const descent = (k: number) => (theta: number) => {
    look(theta, between);
    return { value: -between[2 * k + 1], slope: Number.NaN };
  };
  let low = flow.from;
  let width = Math.min(FIRST_STEP, step);
  let waiting = patient;
  const count = look(low, before);
  while (low < until) {
    const high = Math.min(low + width, until);
    look(high, after);
    const standing = waiting ? undefined : mostViolated(before, after, count);
    if (standing !== undefined) return { at: low, guard: standing };
    let found: Switching | undefined;
    for (let k = 0; k < count; k++) {
      if (!(before[2 * k] < 0)) continue;
      let top = high;
      if (!(after[2 * k] > 0)) {
        const isHill = before[2 * k + 1] > 0 && after[2 * k + 1] < 0;
        if (!isHill) continue;
        top = passes(descent(k), low, high);
        if (!(height(k)(top).value > 0)) continue;
      }
      const at = passes(height(k), low, top);
      if (found === undefined || at < found.at) found = { at, guard: k };
    }
    if (found !== undefined) return found;
    low = high;
    before.set(after);
    waiting = false;
    width = Math.min(2 * width, step);
  }
  return undefined;
}

/** The guard that is highest above nought among those that were not below it and are not below it a little later. */
function mostViolated(before: Float64Array, after: Float64Array, count: number): number | undefined {
  let most: number | undefined;
  for (let k = 0; k < count; k++) {
    if (before[2 * k] < 0 || !(after[2 * k] > 0)) continue;
    if (most === undefined || after[2 * k] > after[2 * most]) most = k;
  }
  return most;
}

/**
 * Where a function passes nought upwards between `low` (not above it) and `high` (above it): Newton's steps where they stay
 * inside and shrink, halving else.
 */
function passes(look: (theta: number) => { value: number; slope: number }, low: number, high: number): number {
  let [from, to] = [low, high];
  let at = (from + to) / 2;
  let last = to - from;
  for (let i = 0; i < 100; i++) {
    const { value, slope } = look(at);
    if (value > 0) to = at;
    else from = at;
    if (to - from <= 4e-16 * Math.max(1, Math.abs(to))) break;
    const newton = at - value / slope;
    const inside = newton > from && newton < to && Math.abs(newton - at) < last / 2;
    const next = inside ? newton : (from + to) / 2;
    last = Math.abs(next - at);
    at = next;
    if (inside && last <= 1e-16 * Math.max(1, Math.abs(at))) break;
  }
  return at;
}

/** What comes after a switching: the next state and the currents (A) it begins with. */
export interface Entrance {
  readonly state: State;
  readonly currents: Float64Array;
  /**
   * The phase whose current ended while the others went on, and the share that is left of a small disturbance of it; the
   * rest goes to the other two evenly. (The disturbance shifts the instant; in that time the phases feel the jump of the
   * voltage at its terminal, which the star divides so.)
   */
  readonly ended: { readonly phase: number; readonly left: number } | undefined;
}

/** See `nextSwitching`. `emf` are the phases' EMFs at the instant, V. */
export function enter(circuit: Circuit, flow: Flow, { at, guard }: Switching, emf: Float64Array): Entrance {
  const quantities = evaluateFlow(flow, at, new Float64Array(4));
  const currents = currentsOf(flow.state, quantities, new Float64Array(3));
  const { kind, phase: c, sign } = flow.state;
  const [a, b] = [(c + 1) % 3, (c + 2) % 3];
  const third = (circuit.voltage + circuit.dcResistance * railCurrent(flow.state, quantities)) / 3;
  switch (kind) {
    case 'none':
      return { state: STARTS[guard], currents, ended: undefined };
    case 'pair': {
      if (guard === 0) {
        return { state: { kind: 'none', phase: 0, sign: 1 }, currents: new Float64Array(3), ended: undefined };
      }
      const joins = guard === 1 ? 1 : -1;
      const lone = joins === sign ? b : a;
      return { state: { kind: 'triple', phase: lone, sign: joins === 1 ? -1 : 1 }, currents, ended: undefined };
    }
    case 'triple': {
      const [out, stays] = guard === 0 ? [a, b] : [b, a];
      currents[out] = 0;
      currents[c] = -currents[stays];
      const push = sign * emf[out];
      if (push > third) {
        const left = (push - third) / (push + third);
        return {
          state: { kind: 'triple', phase: stays, sign: sign === 1 ? -1 : 1 },
          currents,
          ended: { phase: out, left },
        };
      }
      const after = (out + 1) % 3;
      const state: State = { kind: 'pair', phase: out, sign: after === c ? sign : sign === 1 ? -1 : 1 };
      return { state, currents, ended: { phase: out, left: 0 } };
    }
  }
}
