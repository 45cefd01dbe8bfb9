import type { Limits } from '../machine.js';
import type { HeatSink, WindingHeat } from './heat-balance.js';
import { heatAt, heatGivenOff, resistanceRatio } from './heat-balance.js';

/** Insulation classes, hottest spot in degC: IEC 60085 (Y, E and N from memory). */
export const INSULATION_CLASSES = { Y: 90, A: 105, E: 120, B: 130, F: 155, H: 180, N: 200 } as const;

/** What the winding may reach, and what was taken for granted. */
export interface TemperatureLimit {
  /** degC. */
  readonly temperature: number;
  /** What was taken, in words, where no limit is given. */
  readonly assumed?: string;
}

/** The machine's own limit; else class B, which the cheapest enamels bear. */
export function temperatureLimit({ windingTemperature }: Limits): TemperatureLimit {
  if (windingTemperature !== undefined) return { temperature: windingTemperature };
  return {
    temperature: INSULATION_CLASSES.B,
    assumed:
      `${INSULATION_CLASSES.B} degC, insulation class B; many casting resins soften well below, from 60 degC on: give ` +
      'limits.winding_temperature',
  };
}

/**
 * Rms current per phase that warms the winding just to the limit for good, A:
 *
 *   phases R(limit) I^2 = h A (limit - ambient) - heat(limit) of all else
 *
 * 0 where the rest alone is too much.
 *
 * @param rest         heat that does not come from the current: eddies; its `copper20` currents that flow anyway
 * @param phases       how many carry the current
 * @param resistance20 of one, ohm at 20 degC
 */
export function continuousCurrent(
  limit: number,
  rest: WindingHeat,
  sink: HeatSink,
  { phases, resistance20 }: { readonly phases: number; readonly resistance20: number },
): number {
  const left = heatGivenOff(sink, limit) - heatAt(rest, limit);
  return left <= 0 ? 0 : Math.sqrt(left / (phases * resistance20 * resistanceRatio(limit)));
}

/** Heat capacities: copper J/(kg K), cast resin J/(m^3 K) (1200 kg/m^3 of 1100 J/(kg K)); handbook values, from memory. */
const COPPER_CAPACITY = 385;
const RESIN_CAPACITY = 1.3e6;

/** Heat capacity of a cast winding, J/K. */
export function thermalMass(copperMass: number, resinVolume: number): number {
  return COPPER_CAPACITY * copperMass + RESIN_CAPACITY * resinVolume;
}

/** Steps of temperature by which the time is summed up. */
const STEPS = 400;

/**
 * Time from one temperature to a higher one, s; Infinity where the winding comes to rest before.
 *
 *   t = integral of C dT / (heat(T) - h A (T - ambient))
 *
 * over steps in which the heat left to warm the winding is taken to change in a straight line: dT ln(a/b)/(a - b), exact
 * while h is constant but for the eddies. One lump: copper and cast warm together, which is too slow in the first seconds of
 * a hard overload.
 *
 * @param mass heat capacity, J/K
 */
export function timeToReach(limit: number, from: number, heat: WindingHeat, sink: HeatSink, mass: number): number {
  if (from >= limit) return 0;
  const left = (temperature: number): number => heatAt(heat, temperature) - heatGivenOff(sink, temperature);
  const step = (limit - from) / STEPS;
  let time = 0;
  let before = left(from);
  for (let i = 1; i <= STEPS; i++) {
    const after = left(from + i * step);
    if (before <= 0 || after <= 0) return Number.POSITIVE_INFINITY;
    const ratio = after / before;
    // ln(a/b)/(a - b) as the ratio nears 1.
    const logarithm = Math.abs(ratio - 1) < 1e-6 ? 1 / (0.5 * (before + after)) : Math.log(ratio) / (after - before);
    time += mass * step * logarithm;
    before = after;
  }
  return time;
}
