import { COPPER_RESISTANCE_SLOPE } from '../winding/copper.js';
import type { HeatTransfer, Transfer } from './winding-cooling.js';

/** Heat that arises in the winding, as it would be with the copper at 20 degC, W. */
export interface WindingHeat {
  /** Of currents: grows with the resistance as the copper warms. */
  readonly copper20: number;
  /** Eddies in the strands: fall as the resistance grows. */
  readonly eddy20: number;
  /** What does not depend on the temperature. */
  readonly constant?: number;
}

/** How the winding gives its heat to the air. */
export interface HeatSink {
  readonly transfer: Transfer;
  /** m^2. */
  readonly area: number;
  /** Of the air, degC. */
  readonly ambient: number;
}

/** Resistance of copper at a temperature over that at 20 degC:  1 + 0.00393 (T - 20). */
export const resistanceRatio = (temperature: number): number => 1 + COPPER_RESISTANCE_SLOPE * (temperature - 20);

/** W at a temperature of the winding in degC. */
export function heatAt({ copper20, eddy20, constant = 0 }: WindingHeat, temperature: number): number {
  const ratio = resistanceRatio(temperature);
  return copper20 * ratio + eddy20 / ratio + constant;
}

/** W that the winding's faces give off at a temperature of the winding in degC. */
export function heatGivenOff({ transfer, area, ambient }: HeatSink, temperature: number): number {
  const rise = temperature - ambient;
  return transfer(rise).h * area * rise;
}

/** No winding lives to see this, degC: where no balance is found below, there is none that matters. */
export const HOTTEST = 1000;

/** The winding in balance with the air. */
export interface ThermalBalance {
  /** degC; undefined where it runs away: each kelvin brings more heat than it carries off. */
  readonly winding: number | undefined;
  /** In balance, W: copper and eddies as hot as it is. */
  readonly heat: { readonly copper: number; readonly eddy: number; readonly total: number };
  /** At the balance, or at `HOTTEST`. */
  readonly transfer: HeatTransfer;
  /** Rise for each watt, K/W. */
  readonly resistance: number;
}

/** Steps by which the balance is looked for; it is then closed in on by halves. */
const SCAN = 1;
const HALVINGS = 60;

/**
 * Temperature of the winding at which it gives off what arises in it:  h A (T - ambient) = heat(T),  resistance fed back; the
 * lowest there is from the ambient temperature upwards, which is where a winding that warms up comes to rest. One lump: the
 * inside is hotter than its faces by what `insideRise` tells.
 */
export function thermalBalance(heat: WindingHeat, sink: HeatSink): ThermalBalance {
  const short = (temperature: number): number => heatAt(heat, temperature) - heatGivenOff(sink, temperature);
  let high = sink.ambient;
  while (short(high) > 0 && high < HOTTEST) high = Math.min(HOTTEST, high + SCAN);
  const winding = short(high) > 0 ? undefined : closeIn(short, Math.max(sink.ambient, high - SCAN), high);
  const at = winding ?? HOTTEST;
  const ratio = resistanceRatio(at);
  const transfer = sink.transfer(at - sink.ambient);
  return {
    winding,
    heat: { copper: heat.copper20 * ratio, eddy: heat.eddy20 / ratio, total: heatAt(heat, at) },
    transfer,
    resistance: 1 / (transfer.h * sink.area),
  };
}

function closeIn(short: (temperature: number) => number, from: number, to: number): number {
  let [low, high] = [from, to];
  for (let i = 0; i < HALVINGS; i++) {
    const middle = (low + high) / 2;
    if (short(middle) > 0) low = middle;
    else high = middle;
  }
  return high;
}

/** Across the layers of a cast winding of round wire, W/(m K): 0.3 to 1 by how full it is (practice, from memory). */
export const CAST_CONDUCTIVITY = 0.5;

/**
 * How much hotter the middle of the winding is than its faces, K: a plate with even heat, cooled on both faces,
 * q t^2/(8 k), with q = heat/(area/2 t):  heat t/(4 k area).
 *
 * @param area both faces, m^2
 */
export function insideRise(heat: number, thickness: number, area: number): number {
  return (heat * thickness) / (4 * CAST_CONDUCTIVITY * area);
}
