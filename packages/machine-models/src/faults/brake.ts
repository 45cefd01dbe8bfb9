import { rms } from '../waves/series.js';
import type { SteadyShort } from './short-circuit.js';
import { steadyShort } from './short-circuit.js';
import type { ShortedMachine } from './shorted-machine.js';
import { drivesOf, mechanicalSpeed } from './shorted-machine.js';

/** A speed at which the terminals are joined. */
export interface BrakePoint {
  readonly speedRpm: number;
  readonly phaseRms: number;
  /** Nm, without drag. */
  readonly torque: number;
}

/** Steady braking at the given speeds, rpm. */
export function brakeCurve(machine: ShortedMachine, speeds: readonly number[]): readonly BrakePoint[] {
  return speeds.map((speedRpm) => pointOf(steadyShort(machine, speedRpm)));
}

const pointOf = ({ speedRpm, phaseRms, torque }: SteadyShort): BrakePoint => ({ speedRpm, phaseRms, torque });

/**
 * Where joined terminals brake most, steadily; undefined without inductance, where the torque rises with the speed for ever.
 *
 * Each harmonic brakes with k w R/(R^2 + (n p w L)^2), k its E^2/w^2 summed over the phases, w the mechanical speed, p the
 * pole pairs: most at w = R/(n p L), where it is k/(2 n p L) whatever the resistance. So the greatest sum lies between the
 * greatest speed and the least of these.
 */
export function greatestBrake(machine: ShortedMachine): BrakePoint | undefined {
  const { resistance, poles } = machine;
  const waves = harmonicBrakes(machine);
  if (waves.length === 0 || waves.some(({ inductance }) => inductance === 0)) return undefined;
  const tops = waves.map(({ order, inductance }) => resistance / (order * (poles / 2) * inductance));
  const torque = (w: number): number =>
    waves.reduce((sum, { order, strength, inductance }) => {
      const x = order * (poles / 2) * w * inductance;
      return sum + (strength * w * resistance) / (resistance * resistance + x * x);
    }, 0);
  const at = highestBetween(torque, Math.min(...tops), Math.max(...tops));
  return pointOf(steadyShort(machine, (60 * at) / (2 * Math.PI)));
}

interface HarmonicBrake {
  readonly order: number;
  /** Sum over the phases of E_n^2 / w^2, V^2 s^2. */
  readonly strength: number;
  readonly inductance: number;
}

/** Of the strongest harmonic, what is less than this is rounding. */
const NOTHING = 1e-12;

function harmonicBrakes(machine: ShortedMachine): readonly HarmonicBrake[] {
  const w = mechanicalSpeed(machine.speedRpm);
  const drives = drivesOf(machine).flat();
  const all = drives.flatMap(({ emf, inductance }) =>
    emf.order.map((order, i) => ({
      order,
      inductance,
      strength: rms({ order: [order], cos: [emf.cos[i]], sin: [emf.sin[i]] }) ** 2 / (w * w),
    })),
  );
  const most = Math.max(0, ...all.map(({ strength }) => strength));
  return all.filter(({ strength }) => strength > NOTHING * most);
}

const SCAN = 200;

/** The highest of a function of several humps, by a scan in equal ratios and halving about its highest point. */
function highestBetween(height: (w: number) => number, from: number, to: number): number {
  const ratio = (to / from) ** (1 / SCAN);
  let best = from;
  for (let i = 1; i <= SCAN; i++) if (height(from * ratio ** i) > height(best)) best = from * ratio ** i;
  for (let step = ratio - 1; step > 1e-9; step /= 2) {
    for (const w of [best / (1 + step), best * (1 + step)]) if (height(w) > height(best)) best = w;
  }
  return Math.min(to, Math.max(from, best));
}

/** J/(kg K), copper at room temperature; from memory. */
const COPPER_HEAT = 385;

/** How fast the shorted winding warms before any heat leaves it, K/s. */
export const heatingRate = (heat: number, copperMass: number): number => heat / (copperMass * COPPER_HEAT);
