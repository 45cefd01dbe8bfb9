import { antiderivative, evaluate, type Series } from '../waves/series.js';

/**
 * Highest less lowest terminal of a star or delta, which is the largest of the voltages between its terminals, whichever
 * way round. Two stars (six phases), each with a bridge of its own, feed one bus in parallel: the higher of the two.
 *
 * @param lines all voltages between terminals of one star, of every star
 */
export function rectifiedAt(lines: readonly Series[], theta: number): number {
  return Math.max(...lines.map((line) => Math.abs(evaluate(line, theta))));
}

/**
 * Mean of `rectifiedAt` over a period, without sampling error: the period is cut where one line voltage takes over from
 * another (found by bisection between points half a degree apart) and each stretch is integrated in closed form. Odd
 * orders repeat |f| every half period, so half is enough.
 *
 * For sinusoidal EMFs of peak E in m phases it is the widest line's peak times sin(x)/x, x = pi/pulses, pulses the tops in
 * a period:  three phases (3/pi) sqrt(3) E, five (10/pi) sin(36 deg) E, in general (2m/pi) sin(pi/m) E where m is odd; two,
 * 90 degrees apart, (2/pi) sqrt(2) E; six in two stars (12/pi) sin(15 deg) sqrt(3) E.
 */
export function rectifiedMean(lines: readonly Series[]): number {
  const integrals = lines.map(antiderivative);
  const steps = 360;
  let sum = 0;
  let leader = leaderAt(lines, 0);
  let from = 0;
  const close = (to: number): void => {
    sum += leader.sign * (evaluate(integrals[leader.line], to) - evaluate(integrals[leader.line], from));
    from = to;
  };
  for (let i = 1; i <= steps; i++) {
    const theta = (i * Math.PI) / steps;
    const next = leaderAt(lines, theta);
    if (next.line === leader.line && next.sign === leader.sign) continue;
    close(crossing(lines, leader, next, ((i - 1) * Math.PI) / steps, theta));
    leader = next;
  }
  close(Math.PI);
  return sum / Math.PI;
}

/** The voltage that is largest, and its sign. */
interface Leader {
  readonly line: number;
  readonly sign: 1 | -1;
}

function leaderAt(lines: readonly Series[], theta: number): Leader {
  const values = lines.map((line) => evaluate(line, theta));
  const line = values.reduce((best, value, i) => (Math.abs(value) > Math.abs(values[best]) ? i : best), 0);
  return { line, sign: values[line] < 0 ? -1 : 1 };
}

/** Where `after` overtakes `before`, which leads at `low` but not at `high`. */
function crossing(lines: readonly Series[], before: Leader, after: Leader, low: number, high: number): number {
  const lead = (theta: number): number =>
    before.sign * evaluate(lines[before.line], theta) - after.sign * evaluate(lines[after.line], theta);
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (lead(middle) >= 0) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
