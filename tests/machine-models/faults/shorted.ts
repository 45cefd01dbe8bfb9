import type { ShortedMachine } from '../../../packages/machine-models/src/faults/shorted-machine.js';
import type { Series } from '../../../packages/machine-models/src/waves/series.js';
import { phaseLags } from '../../../packages/machine-models/src/winding/coil-places.js';

/** EMF of each phase: sum peak_n sin(n (theta - lag)). */
export function emfs(
  phases: ShortedMachine['phases'],
  order: readonly number[],
  peak: readonly number[],
): readonly Series[] {
  return phaseLags(phases).map((lag) => ({
    order,
    cos: peak.map((value, i) => -value * Math.sin((order[i] ?? 0) * lag)),
    sin: peak.map((value, i) => value * Math.cos((order[i] ?? 0) * lag)),
  }));
}

/** Three phases in star, 16 poles, 420 rpm; figures of a hydro set's first estimate. */
export function shorted(parts: Partial<ShortedMachine> = {}): ShortedMachine {
  return {
    emf: emfs(parts.phases ?? 3, [1], [51.7 * Math.SQRT2]),
    speedRpm: 420,
    poles: 16,
    phases: 3,
    connection: 'star',
    resistance: 0.535,
    inductance: 0.78e-3,
    ...parts,
  };
}

/** Runge-Kutta steps of L di/ds = (e(theta0 + s) - R i)/w from no current; s in electrical radians. */
export function integrate(
  emf: (theta: number) => number,
  { resistance, henry, w }: { readonly resistance: number; readonly henry: number; readonly w: number },
  start: number,
  turns: number,
  steps: number,
): Float64Array {
  const h = (2 * Math.PI) / steps;
  const slope = (theta: number, i: number): number => (emf(theta) - resistance * i) / (w * henry);
  const currents = new Float64Array(turns * steps + 1);
  for (let n = 0; n < turns * steps; n++) {
    const theta = start + n * h;
    const i = currents[n] ?? 0;
    const k1 = slope(theta, i);
    const k2 = slope(theta + h / 2, i + (h / 2) * k1);
    const k3 = slope(theta + h / 2, i + (h / 2) * k2);
    const k4 = slope(theta + h, i + h * k3);
    currents[n + 1] = i + (h / 6) * (k1 + 2 * k2 + 2 * k3 + k4);
  }
  return currents;
}
