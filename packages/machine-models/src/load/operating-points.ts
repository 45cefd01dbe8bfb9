import { figure } from '../input/format-figure.js';
import type { PrimeMover } from '../machine.js';

/** A speed at which the prime mover gives what the machine takes. */
export interface OperatingPoint {
  readonly speed_rpm: number;
  readonly shaft_W: number;
  /** Whether a small change of speed dies away: above it the machine takes more than is offered. */
  readonly stable: boolean;
}

/** Where a prime mover and its load meet. */
export interface Match {
  /** Rising in speed. */
  readonly points: readonly OperatingPoint[];
  /**
   * settles: there is a stable point. stalls: the machine takes more than is offered all through the table. runs away: at
   * the end of the table more is offered than taken, and no stable point comes before.
   */
  readonly outcome: 'settles' | 'stalls' | 'runs away';
  /** The same in words, with what else there is to know. */
  readonly notes: readonly string[];
}

const SPEEDS = 60;

/**
 * Crossings of a prime mover's power with a machine's, between the first and last speed of its table (straight between
 * rows); both per shaft, so that power over speed compares torques. Speeds are looked at in steps of a sixtieth of the table,
 * at its rows and at `breaks`; two crossings closer together than that may be missed.
 *
 * @param demand power that the machine takes at its shaft at a speed (rpm), drag and losses of turning included, W
 * @param breaks speeds at which the demand bends, rpm: cut-in
 * @param overspeedRpm no stable point should lie above it
 */
export function operatingPoints(
  mover: PrimeMover,
  demand: (rpm: number) => number,
  breaks: readonly number[] = [],
  overspeedRpm?: number,
): Match {
  const speeds = speedsOf(mover, breaks);
  const excess = (rpm: number): number => offered(mover, rpm) - demand(rpm);
  const points: OperatingPoint[] = [];
  let before = excess(speeds[0]);
  const atStart = before;
  for (let i = 1; i < speeds.length; i++) {
    const after = excess(speeds[i]);
    if (before > 0 !== after > 0) {
      const rpm = crossing(excess, speeds[i - 1], before, speeds[i], after);
      points.push({ speed_rpm: rpm, shaft_W: offered(mover, rpm), stable: before > 0 });
    }
    before = after;
  }
  const settles = points.some(({ stable }) => stable);
  const outcome = settles ? 'settles' : before > 0 ? 'runs away' : 'stalls';
  return { points, outcome, notes: describe(points, outcome, atStart, before, speeds, overspeedRpm) };
}

/** Power offered at a speed, W: straight between rows, and as at the nearest row outside them. */
function offered({ points }: PrimeMover, rpm: number): number {
  const next = points.findIndex(([speed]) => speed >= rpm);
  if (next < 0) return points[points.length - 1][1];
  if (next === 0) return points[0][1];
  const [[from, low], [to, high]] = [points[next - 1], points[next]];
  return low + ((high - low) * (rpm - from)) / (to - from);
}

/** Rising, between the ends of the table; never nought, where nothing turns and nothing can be told apart. */
function speedsOf({ points }: PrimeMover, breaks: readonly number[]): readonly number[] {
  const last = points[points.length - 1][0];
  const first = Math.max(points[0][0], last / 1000);
  const even = Array.from({ length: SPEEDS + 1 }, (_, i) => first + ((last - first) * i) / SPEEDS);
  const all = [...even, ...points.map(([rpm]) => rpm), ...breaks].filter((rpm) => rpm >= first && rpm <= last);
  return [...new Set(all)].sort((a, b) => a - b);
}

/** False position, the standing end's value halved (Illinois); ends of different sign. */
function crossing(excess: (rpm: number) => number, low: number, atLow: number, high: number, atHigh: number): number {
  let [a, fa, b, fb] = [low, atLow, high, atHigh];
  let at = b;
  for (let i = 0; i < 60; i++) {
    at = fa === fb ? (a + b) / 2 : (a * fb - b * fa) / (fb - fa);
    const value = excess(at);
    if (value === 0 || Math.abs(b - a) <= 1e-12 * high) return at;
    if (value > 0 !== fb > 0) {
      [a, fa] = [b, fb];
    } else {
      fa /= 2;
    }
    const moved = Math.abs(at - b);
    [b, fb] = [at, value];
    if (moved <= 1e-11 * high) return at;
  }
  return at;
}

function describe(
  points: readonly OperatingPoint[],
  outcome: Match['outcome'],
  atStart: number,
  atEnd: number,
  speeds: readonly number[],
  overspeedRpm: number | undefined,
): readonly string[] {
  const [first, last] = [figure(speeds[0]), figure(speeds[speeds.length - 1])];
  const stable = points.filter((point) => point.stable);
  const notes: string[] = [];
  if (outcome === 'stalls') {
    notes.push(
      `stall: from ${first} to ${last} rpm the machine takes more than the prime mover offers; it slows down below the table`,
    );
  }
  for (const { speed_rpm, shaft_W } of stable) {
    notes.push(`settles at ${figure(speed_rpm)} rpm with ${figure(shaft_W)} W at the shaft`);
  }
  const [lowest] = points;
  if (outcome !== 'stalls' && atStart <= 0 && lowest !== undefined) {
    notes.push(
      `stall: below ${figure(lowest.speed_rpm)} rpm the machine takes more than is offered; it must be brought above that speed`,
    );
  }
  if (atEnd > 0) {
    const from = points[points.length - 1]?.speed_rpm ?? speeds[0];
    notes.push(
      `runaway: above ${figure(from)} rpm more is offered than the machine takes, up to the end of the table at ${last} rpm`,
    );
  }
  const fast = stable.find(({ speed_rpm }) => overspeedRpm !== undefined && speed_rpm > overspeedRpm);
  if (fast !== undefined && overspeedRpm !== undefined) {
    notes.push(
      `overspeed: it settles at ${figure(fast.speed_rpm)} rpm, above the ${figure(overspeedRpm)} rpm it is built for`,
    );
  }
  return notes;
}
