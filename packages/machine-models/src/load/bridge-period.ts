import { type Circuit, currentsOf, emfAt, evaluateFlow, type Flow, type State, startFlow } from './conduction.js';
import { type Entrance, enter, nextSwitching } from './switching.js';

/** A flow up to its end. */
export interface Stretch {
  readonly flow: Flow;
  readonly to: number;
}

/** The periodic state of a bridge over `span`, from theta = 0: a sixth of a period, or half of one, repeats with other signs. */
export interface BridgePeriod {
  readonly stretches: readonly Stretch[];
  readonly span: number;
  readonly report: {
    /** The currents at the end repeat those at the start, and no switching was left out. */
    readonly converged: boolean;
    /** Times the span was followed. */
    readonly passes: number;
    readonly switchings: number;
    /** Estimated distance of the currents at the start from periodic ones, over those at short circuit. */
    readonly error: number;
  };
}

const MOST_SWITCHINGS = 2000;
const MOST_PASSES = 100;

/** Error of the start, and difference between end and start, at which Newton's method ends; over the current at short circuit. */
const PERIODIC = 1e-12;
const ROUNDING = 1e-15;

/** So many changes at one instant are taken for rounding's doing. */
const PATIENCE = 4;

/** Looks per wavelength of the highest order, and per period of the fundamental at least. */
const LOOKS_PER_WAVE = 8;
const LEAST_LOOKS = 144;

/**
 * The periodic state. Any two histories of such a circuit draw together (its diodes and resistances only ever take energy
 * from their difference), by exp(-R/X span) or more per span; so the state is unique, and following the circuit converges
 * to it. Newton's method on the currents at the start makes that quick where R/X is small: how a small disturbance of
 * them ends up is carried along in closed form, see `Entrance.ended`. A step of Newton that leaves the currents no
 * nearer to repeating is undone, and the circuit simply followed on.
 */
export function bridgePeriod(circuit: Circuit): BridgePeriod {
  const span = circuit.symmetric ? Math.PI / 3 : Math.PI;
  const step = (2 * Math.PI) / Math.max(LEAST_LOOKS, LOOKS_PER_WAVE * circuit.highest);
  let start: readonly number[] = [0, 0, 0];
  let best = follow(circuit, start, span, step);
  let passes = 1;
  let error = Number.POSITIVE_INFINITY;
  while (passes < MOST_PASSES) {
    const change = newtonStep(start, best);
    error = size(change) / circuit.scale;
    if (circuit.reactance === 0 || size(change) === 0) break;
    const isNear = error <= PERIODIC || size(subtract(best.end, start)) <= ROUNDING * circuit.scale;
    if (isNear && passes > 1) break; // just above cut-in all currents are near nought, and the first start is a guess
    const tried = add(start, change);
    const after = follow(circuit, tried, span, step);
    passes++;
    if (size(subtract(after.end, tried)) < 0.5 * size(subtract(best.end, start))) {
      [start, best] = [tried, after];
    } else {
      start = best.end;
      best = follow(circuit, start, span, step);
      passes++;
    }
  }
  const converged = best.isWhole && (circuit.reactance === 0 || error <= 1e-9);
  if (circuit.reactance === 0) error = 0;
  const report = { converged, passes, switchings: best.stretches.length - 1, error };
  return { stretches: best.stretches, span, report };
}

/** The circuit followed over one span. */
interface Pass {
  readonly stretches: readonly Stretch[];
  /** Currents at the end, told as those of the start: what they would have to be, A. */
  readonly end: readonly number[];
  /** By how much `end` moves when current is added to phase 1 or 2 and taken from phase 3 at the start, A per A. */
  readonly moves: readonly (readonly number[])[];
  readonly isWhole: boolean;
}

function follow(circuit: Circuit, start: readonly number[], span: number, step: number): Pass {
  const scratch = new Float64Array(4);
  const emf = new Float64Array(4);
  const stretches: Stretch[] = [];
  let entrance = initial(circuit, start);
  let moves: readonly (readonly number[])[] = [
    [1, 0, -1],
    [0, 1, -1],
  ];
  let from = 0;
  let still = 0;
  let isWhole = true;
  for (;;) {
    const { state, currents, ended } = entrance;
    moves = moves.map((move) => narrowed(state, ended === undefined ? move : handedOver(move, ended)));
    const flow = startFlow(circuit, state, from, currents);
    const full = stretches.length >= MOST_SWITCHINGS;
    const switching = full ? undefined : nextSwitching(circuit, flow, span, step, still >= PATIENCE);
    isWhole = !full;
    const to = switching?.at ?? span;
    still = to > from ? 0 : still + 1;
    if (to > from) stretches.push({ flow, to });
    moves = moves.map((move) => faded(flow, move, to - from));
    if (switching === undefined) {
      const last = currentsOf(state, evaluateFlow(flow, to, scratch), new Float64Array(3));
      return { stretches, end: retold(circuit, last), moves: moves.map((move) => retold(circuit, move)), isWhole };
    }
    entrance = enter(circuit, flow, switching, emfAt(circuit, to, emf));
    from = to;
  }
}

/** e_1 a sixth of a period on is -e_2 now, and so on; half a period on every EMF is its own negative. */
function retold(
  { symmetric }: Circuit,
  [first, second, third]: ArrayLike<number> & Iterable<number>,
): readonly number[] {
  return symmetric ? [-third, -first, -second] : [-first, -second, -third];
}

/** The state in which currents flow; those that are nought but for rounding are taken for nought. */
function initial(circuit: Circuit, start: readonly number[]): Entrance {
  const flowing = start.map((current) => (Math.abs(current) <= 1e-13 * circuit.scale ? 0 : current));
  const idle = flowing.indexOf(0);
  const isNone = flowing.filter((current) => current === 0).length > 1;
  if (isNone) {
    return { state: { kind: 'none', phase: 0, sign: 1 }, currents: new Float64Array(3), ended: undefined };
  }
  if (idle >= 0) {
    const a = (idle + 1) % 3;
    const currents = new Float64Array(3);
    currents[a] = flowing[a];
    currents[(idle + 2) % 3] = -flowing[a];
    return {
      state: { kind: 'pair', phase: idle, sign: flowing[a] > 0 ? 1 : -1 },
      currents,
      ended: { phase: idle, left: 0 },
    };
  }
  const positive = flowing.filter((current) => current > 0).length;
  const sign = positive === 1 ? 1 : -1;
  const lone = flowing.findIndex((current) => current > 0 === (sign === 1));
  return { state: { kind: 'triple', phase: lone, sign }, currents: Float64Array.from(flowing), ended: undefined };
}

/** What is left of a disturbance in a state: an idle phase has none. */
function narrowed({ kind }: State, move: readonly number[]): readonly number[] {
  return kind === 'none' ? [0, 0, 0] : move;
}

function handedOver(move: readonly number[], { phase, left }: NonNullable<Entrance['ended']>): readonly number[] {
  const lost = (1 - left) * move[phase];
  return move.map((value, k) => (k === phase ? value - lost : value + lost / 2));
}

/** A disturbance after an angle: see the equations of `Circuit`. */
function faded({ state, firstRate, secondRate }: Flow, move: readonly number[], angle: number): readonly number[] {
  if (state.kind === 'none' || angle === 0) return move;
  const first = Math.exp(-firstRate * angle);
  if (state.kind === 'pair') return move.map((value) => value * first);
  const quantities = new Float64Array(4);
  const [a, b] = [(state.phase + 1) % 3, (state.phase + 2) % 3];
  quantities[0] = move[state.phase] * first;
  quantities[2] = (move[a] - move[b]) * Math.exp(-secondRate * angle);
  return [...currentsOf(state, quantities, new Float64Array(3))];
}

/** The change of the start for which end - start vanishes, to first order: (1 - moves) change = end - start. */
function newtonStep(start: readonly number[], { end, moves }: Pass): readonly number[] {
  const [one, two] = subtract(end, start);
  const [[m11, m21], [m12, m22]] = moves;
  const [a, b, c, d] = [1 - m11, -m12, -m21, 1 - m22];
  const det = a * d - b * c;
  const first = (d * one - b * two) / det;
  const second = (a * two - c * one) / det;
  return [first, second, -first - second];
}

function add(one: readonly number[], other: readonly number[]): readonly number[] {
  return one.map((value, i) => value + other[i]);
}

function subtract(one: readonly number[], other: readonly number[]): readonly number[] {
  return one.map((value, i) => value - other[i]);
}

function size(values: readonly number[]): number {
  return Math.max(...values.map(Math.abs));
}
