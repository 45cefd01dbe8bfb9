import type { Machine, Warning } from '../machine.js';
import { COPPER_DENSITY } from '../winding/copper.js';
import { copperMass, phaseResistance } from '../winding/turn.js';
import type { HeatSink, ThermalBalance, WindingHeat } from './heat-balance.js';
import { insideRise, thermalBalance } from './heat-balance.js';
import type { TemperatureLimit } from './limits.js';
import { continuousCurrent, temperatureLimit, thermalMass, timeToReach } from './limits.js';
import type { WindingFaces } from './winding-cooling.js';
import { describeCooling, windingFaces, windingTransfer } from './winding-cooling.js';

/** What goes on in the winding at one operating point. */
export interface WindingService {
  /** Rms, of each phase, A. */
  readonly phaseCurrent: number;
  readonly speedRpm: number;
  /** Eddies in the strands as they would be with the copper at 20 degC, W. */
  readonly eddyLoss20: number;
  /** Copper loss of currents inside the winding (closed delta, unlike paths) with the copper at 20 degC, W. */
  readonly circulationLoss20?: number;
}

/** The winding in service. */
export interface WindingThermal {
  /** degC; undefined where the heat runs away. */
  readonly winding: number | undefined;
  /** Its middle, hotter than the faces by what the cast conducts, degC. */
  readonly middle: number | undefined;
  readonly balance: ThermalBalance;
  readonly faces: WindingFaces;
  /** What was taken for the cooling, in words. */
  readonly cooling: string;
  readonly limit: TemperatureLimit;
  /** Rms current per phase the winding bears for good at this speed, A. */
  readonly continuousCurrent: number;
  /** Heat capacity, J/K. */
  readonly mass: number;
  readonly overloads: readonly Overload[];
  readonly warnings: readonly Warning[];
}

/** How long more than the continuous current is borne. */
export interface Overload {
  /** Current over the continuous one. */
  readonly times: number;
  /** Rms per phase, A. */
  readonly current: number;
  /** To the limit, s: from the temperature of the air, and from that in service (0 where it is past the limit). */
  readonly fromCold: number;
  readonly fromService: number;
}

const OVERLOADS = [1.25, 1.5, 2, 3];

/** Temperature of the winding in service, what it bears for good and how long it bears more. */
export function windingThermal(machine: Machine, service: WindingService): WindingThermal {
  const { winding, operation, rotor, limits } = machine;
  const { phaseCurrent, speedRpm, eddyLoss20, circulationLoss20 = 0 } = service;
  const faces = windingFaces(winding);
  const sink: HeatSink = {
    transfer: windingTransfer(faces, (2 * Math.PI * speedRpm) / 60, operation.cooling),
    area: faces.area,
    ambient: operation.ambient,
  };
  const carriers = { phases: winding.phases, resistance20: phaseResistance(winding, rotor.poles, 20) };
  const heatAtCurrent = (current: number): WindingHeat => ({
    copper20: carriers.phases * carriers.resistance20 * current ** 2 + circulationLoss20,
    eddy20: eddyLoss20,
  });
  const limit = temperatureLimit(limits);
  const balance = thermalBalance(heatAtCurrent(phaseCurrent), sink);
  const current = continuousCurrent(limit.temperature, heatAtCurrent(0), sink, carriers);
  const mass = castMass(machine, faces);
  const inside = insideRise(balance.heat.total, winding.thickness, faces.area);
  const middle = balance.winding === undefined ? undefined : balance.winding + inside;
  const until = (from: number, times: number): number =>
    timeToReach(limit.temperature, from, heatAtCurrent(times * current), sink, mass);
  return {
    winding: balance.winding,
    middle,
    balance,
    faces,
    cooling: describeCooling(balance.transfer, faces),
    limit,
    continuousCurrent: current,
    mass,
    overloads:
      current === 0
        ? []
        : OVERLOADS.map((times) => ({
            times,
            current: times * current,
            fromCold: until(operation.ambient, times),
            fromService: balance.winding === undefined ? 0 : until(balance.winding, times),
          })),
    warnings: warningsOf(balance, middle, limit, current),
  };
}

/** Copper, and resin in all the rest of the ring, J/K. */
function castMass({ winding, rotor }: Machine, faces: WindingFaces): number {
  const copper = copperMass(winding, rotor.poles);
  return thermalMass(copper, Math.max(0, (faces.area / 2) * winding.thickness - copper / COPPER_DENSITY));
}

/**
 * The temperature at which a load that depends on it comes to rest: `next` gives the balance with the currents that flow at a
 * temperature; undefined where it runs away. Repeated until it changes by less than a hundredth of a kelvin, which it does
 * soon: hotter copper lets less current through, or at most little more heat arise.
 */
export function settleTemperature(
  guess: number,
  next: (temperature: number) => number | undefined,
): { readonly temperature: number | undefined; readonly settled: boolean } {
  let temperature = guess;
  for (let round = 0; round < ROUNDS; round++) {
    const found = next(temperature);
    if (found === undefined) return { temperature: undefined, settled: true };
    if (Math.abs(found - temperature) < SETTLED) return { temperature: found, settled: true };
    temperature = found;
  }
  return { temperature, settled: false };
}

const ROUNDS = 40;
/** K. */
const SETTLED = 0.01;

const KEY = 'thermal.winding_C';

function warningsOf(
  { winding }: ThermalBalance,
  middle: number | undefined,
  limit: TemperatureLimit,
  current: number,
): readonly Warning[] {
  const warnings: Warning[] = [];
  const warn = (text: string): number => warnings.push({ key: KEY, text });
  const degrees = (value: number): string => `${value.toFixed(0)} degC`;
  if (current === 0)
    warn(`eddies and the air alone bring the winding to ${degrees(limit.temperature)}: no current is borne for good`);
  if (winding === undefined || middle === undefined) {
    warn(
      'the winding burns: as it warms its resistance brings more heat than the air carries off, and it finds no rest',
    );
  } else if (winding > limit.temperature) {
    warn(`the winding comes to ${degrees(winding)}, above its limit of ${degrees(limit.temperature)}`);
  } else if (middle > limit.temperature) {
    warn(
      `the winding's faces come to ${degrees(winding)}, its middle to about ${degrees(middle)}, above its limit of ` +
        degrees(limit.temperature),
    );
  }
  return warnings;
}
