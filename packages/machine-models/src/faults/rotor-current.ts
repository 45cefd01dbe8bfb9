import type { ShortedMachine } from './shorted-machine.js';
import { electricalSpeed } from './shorted-machine.js';

/**
 * Balanced currents of all phases as the rotor sees them, peak values, A: at the electrical angle theta phase 1 carries
 * -direct cos(theta) + quadrature sin(theta), the others lag as `phaseLags` tells.
 */
export interface RotorCurrent {
  /** Its flux opposes the magnets'. */
  readonly direct: number;
  /** In phase with the EMF: what brakes. */
  readonly quadrature: number;
}

const STEPS = 24;

/**
 * Fundamental of the currents after joining the terminals of the open machine, speed held, in steps over one electrical turn;
 * the steady state last. With the EMF's peak E, X = w L and the electrical angle s since then,
 *
 *   direct + j quadrature = E (X + j R)/(R^2 + X^2) (1 - exp(-(R/X + j) s)).
 *
 * It does not depend on when the terminals were joined. Where R is small the magnets bear twice the steady direct current
 * half a period after (the winding holds the flux it had; textbook on sudden short circuits).
 */
export function shortCircuitPath(machine: ShortedMachine, speedRpm: number): readonly RotorCurrent[] {
  const { resistance: r, poles, inductance } = machine;
  const peak = (fundamentalPeak(machine) * speedRpm) / machine.speedRpm;
  const x = electricalSpeed(poles, speedRpm) * inductance;
  const [direct, quadrature] = [(peak * x) / (r * r + x * x), (peak * r) / (r * r + x * x)];
  const path: RotorCurrent[] = [];
  for (let i = 1; i <= STEPS; i++) {
    const s = (2 * Math.PI * i) / STEPS;
    const left = x === 0 ? 0 : Math.exp((-r / x) * s);
    const [re, im] = [1 - left * Math.cos(s), left * Math.sin(s)];
    path.push({ direct: direct * re - quadrature * im, quadrature: direct * im + quadrature * re });
  }
  path.push({ direct, quadrature });
  return path;
}

/**
 * Peak of the fundamental of the first phase's EMF, V: it has no part that is alike in all phases. Of two phases in one star,
 * whose currents are opposite and so make two waves that run against each other, each half as strong, it bounds their sum.
 */
function fundamentalPeak({ emf: [first] }: ShortedMachine): number {
  const at = first.order.indexOf(1);
  return at < 0 ? 0 : Math.hypot(first.cos[at], first.sin[at]);
}
