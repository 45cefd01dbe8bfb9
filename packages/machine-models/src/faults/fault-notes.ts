import type { Warning } from '../machine.js';
import type { BrakePoint } from './brake.js';
import type { ShortCircuit } from './short-circuit.js';

/** Above this a DC voltage is taken for a shock hazard, V; from memory, limits differ by country. */
export const TOUCH_VOLTAGE = 60;

/**
 * Speed from which the rectified voltage of the open machine can kill who touches it, rpm.
 *
 * @param openPeak  highest rectified voltage with the load open at `speedRpm`, V, to which it is proportional
 */
export function touchSpeed(openPeak: number, speedRpm: number): number | undefined {
  return openPeak > 0 ? (speedRpm * TOUCH_VOLTAGE) / openPeak : undefined;
}

/** Below this share of room under the controller's limit it is told too: EMF may be off by as much. */
const ROOM = 0.05;

/** Peak of the open machine at overspeed against what the controller stands, both in V; nothing to say: undefined. */
export function controllerWarning(overspeedPeak: number, limit: number): Warning | undefined {
  if (overspeedPeak <= (1 - ROOM) * limit) return undefined;
  const peak = `${figure(overspeedPeak)} V`;
  const text =
    overspeedPeak > limit
      ? `with the load off, the rectified voltage reaches ${peak} at overspeed, above the controller's ${figure(limit)} V: ` +
        'it will fail; fewer turns, a wider gap, a dump load that cannot be thrown off, or a controller for more'
      : `with the load off, the rectified voltage reaches ${peak} at overspeed, ${figure(100 * (1 - overspeedPeak / limit))} % ` +
        `below the controller's ${figure(limit)} V: magnets and gap may be off by as much`;
  return { key: 'limits.controller_voltage', text };
}

/** What a short circuit is held against. */
export interface RatedFigures {
  /** Rms of a phase, A. */
  readonly current?: number;
  /** At the shaft, Nm. */
  readonly torque?: number;
}

/** Below this, before any heat leaves, the winding warms too slowly to burn in minutes, K/s; a judgement. */
const SLOW_WARMING = 0.2;

/**
 * The caution beside the short-circuit figures.
 *
 * @param top  where the brake is strongest; undefined where it rises with the speed for ever
 * @param warming  K/s
 */
export function shortCircuitCaution(
  short: ShortCircuit,
  top: BrakePoint | undefined,
  rated: RatedFigures,
  warming: number,
): string {
  const times = (value: number, of: number | undefined): string =>
    of === undefined || of <= 0 ? '' : ` (${figure(value / of)} times rated)`;
  const { phaseRms, firstPeak, torque, speedRpm } = short;
  const sentences = [
    `Short circuit: with all terminals joined at ${figure(speedRpm)} rpm each phase carries ${figure(phaseRms)} A rms` +
      `${times(phaseRms, rated.current)}, ${figure(firstPeak)} A at the first peak, and brakes with ${figure(torque)} Nm` +
      `${times(torque, rated.torque)}.`,
  ];
  if (top !== undefined && top.speedRpm < speedRpm) {
    sentences.push(
      `Most is ${figure(top.torque)} Nm at ${figure(top.speedRpm)} rpm; above that the brake gets weaker with speed and may ` +
        'not stop what drives it.',
    );
  }
  if (warming > SLOW_WARMING) sentences.push(`The winding warms by ${figure(warming)} K/s at first.`);
  sentences.push('Join the terminals when slow, and see that shaft, coupling and blades stand the torque.');
  return sentences.join(' ');
}

/** At least three significant digits, no exponent, no zeros after the point alone. */
export function figure(value: number): string {
  const digits = value === 0 ? 0 : Math.max(0, 2 - Math.floor(Math.log10(Math.abs(value))));
  return value.toFixed(Math.min(digits, 6)).replace(/\.0+$/, '');
}
