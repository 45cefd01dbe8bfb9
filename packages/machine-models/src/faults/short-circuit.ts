import type { Series } from '../waves/series.js';
import { combine, evaluate, peak, rms } from '../waves/series.js';
import type { Drive, ShortedMachine } from './shorted-machine.js';
import { drivesOf, electricalSpeed, mechanicalSpeed } from './shorted-machine.js';

/** All terminals joined at one speed, for long. */
export interface SteadyShort {
  readonly speedRpm: number;
  /** Steady current of each phase against the electrical angle, A, positive along its EMF. */
  readonly currents: readonly Series[];
  /** Of one phase, steady, A. */
  readonly phaseRms: number;
  readonly phasePeak: number;
  /** Through a joined terminal, steady, A: of a delta, the difference of two phases. */
  readonly terminalRms: number;
  /** Heat in the phases' resistance, steady, W: all of it comes from the shaft. */
  readonly heat: number;
  /** Mean, steady, without drag, Nm. */
  readonly torque: number;
}

/** The same with how it begins. */
export interface ShortCircuit extends SteadyShort {
  /**
   * Highest current of a phase in the first turn after joining the terminals of the open machine at the worst instant, speed
   * held, A; by steps of an electrical degree.
   */
  readonly firstPeak: number;
}

/**
 * Short circuit at all terminals, harmonic by harmonic: i_n = e_n / (R + j n w L), w electrical. The inductance is taken as
 * alike at every position of the rotor, and for all space harmonics of the winding.
 */
export function shortCircuit(machine: ShortedMachine, speedRpm: number): ShortCircuit {
  const parts = currentParts(machine, speedRpm);
  return { ...describe(machine, parts, speedRpm), firstPeak: firstPeak(machine, parts[0], speedRpm) };
}

/** The steady state alone. */
export function steadyShort(machine: ShortedMachine, speedRpm: number): SteadyShort {
  return describe(machine, currentParts(machine, speedRpm), speedRpm);
}

/** Each phase's current by what drives it. */
function currentParts(machine: ShortedMachine, speedRpm: number): readonly (readonly Series[])[] {
  return drivesOf(machine).map((drives) => drives.map((drive) => steadyCurrent(machine, drive, speedRpm)));
}

function describe(machine: ShortedMachine, parts: readonly (readonly Series[])[], speedRpm: number): SteadyShort {
  const { resistance, connection } = machine;
  const currents = parts.map((list) =>
    combine(
      list,
      list.map(() => 1),
    ),
  );
  const heat = resistance * currents.reduce((sum, current) => sum + rms(current) ** 2, 0);
  const last = currents[currents.length - 1];
  return {
    speedRpm,
    currents,
    phaseRms: rms(currents[0]),
    phasePeak: peak(currents[0]),
    terminalRms: rms(connection === 'delta' ? combine([currents[0], last], [1, -1]) : currents[0]),
    heat,
    torque: speedRpm === 0 ? 0 : heat / mechanicalSpeed(speedRpm),
  };
}

/** (C - jS) / (R + jX) by orders, where e_n = C cos(n theta) + S sin(n theta). */
function steadyCurrent(machine: ShortedMachine, { emf, inductance }: Drive, speedRpm: number): Series {
  const { resistance, poles } = machine;
  const scale = speedRpm / machine.speedRpm;
  const reactance = electricalSpeed(poles, speedRpm) * inductance;
  const cos: number[] = [];
  const sin: number[] = [];
  emf.order.forEach((n, i) => {
    const x = n * reactance;
    const share = scale / (resistance * resistance + x * x);
    cos.push(share * (emf.cos[i] * resistance - emf.sin[i] * x));
    sin.push(share * (emf.sin[i] * resistance + emf.cos[i] * x));
  });
  return { order: emf.order, cos, sin };
}

const STEPS = 360;

/**
 * With the terminals joined at the angle theta0, from no current, each part of a phase's current is
 *
 *   i(theta0 + s) = i_steady(theta0 + s) - i_steady(theta0) exp(-s R/(w L)).
 *
 * The highest |i| over theta0 and s; a whole turn s is enough, for what is left of the second term only falls. Half the
 * instants theta0 are: the other half mirror them.
 */
function firstPeak({ resistance, poles, ...machine }: ShortedMachine, parts: readonly Series[], rpm: number): number {
  const { inductance, homopolarInductance = inductance } = machine;
  const step = (2 * Math.PI) / STEPS;
  const speed = electricalSpeed(poles, rpm);
  const waves = parts.map((part) => Float64Array.from({ length: STEPS }, (_, i) => evaluate(part, i * step)));
  const falls = [inductance, homopolarInductance].map((henry) => {
    const rate = speed * henry === 0 ? Infinity : resistance / (speed * henry);
    return Float64Array.from({ length: STEPS + 1 }, (_, s) => (s === 0 ? 1 : Math.exp(-rate * s * step)));
  });
  let highest = 0;
  for (let from = 0; from < STEPS / 2; from++) {
    for (let s = 1; s <= STEPS; s++) {
      const at = (from + s) % STEPS;
      let current = 0;
      for (let k = 0; k < waves.length; k++) current += waves[k][at] - waves[k][from] * falls[k][s];
      highest = Math.max(highest, Math.abs(current));
    }
  }
  return highest;
}
