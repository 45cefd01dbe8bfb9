import type { Cooling, Limits, Load, Machine, Measured, Operation, Prices, PrimeMover } from '../machine.js';
import { COPPER_RESISTIVITY_20C } from '../winding/copper.js';
import type { MachineFile } from './schema.js';
import type { OperationFile } from './schema-operation.js';

/** Drop of one silicon diode at its rated current, V; common practice. */
const USUAL_DROP = 0.9;

/** What the file says of service, in SI units; the checks have seen to it that of alternatives one is given. */
export function buildOperation(file: OperationFile): Operation {
  const { speed, overspeed, ambient, cold, load, cable, drag, cooling, prime_mover } = file;
  return {
    speedRpm: speed,
    ...(overspeed !== undefined && { overspeedRpm: overspeed }),
    ambient,
    ...(cold !== undefined && { cold }),
    ...(load !== undefined && { load: buildLoad(load) }),
    cableResistance: cable === undefined ? 0 : cableResistance(cable),
    ...(drag !== undefined && { drag: { bearing: drag.bearing, windage: drag.windage } }),
    ...(cooling !== undefined && { cooling: buildCooling(cooling) }),
    ...(prime_mover?.kind === 'table' && { primeMover: buildTable(prime_mover.points) }),
  };
}

function buildLoad(load: NonNullable<OperationFile['load']>): Load {
  switch (load.kind) {
    case 'bridge': {
      const { voltage, resistance, diode_drop: diodeDrop = USUAL_DROP } = load;
      return voltage === undefined
        ? { kind: 'bridge', resistance: resistance ?? Number.NaN, diodeDrop }
        : { kind: 'bridge', voltage, diodeDrop };
    }
    case 'resistor':
      return { kind: 'resistor', resistance: load.resistance };
    case 'drive':
      return { kind: 'drive', current: load.current };
  }
}

/** Of one conductor, ohm: as given, or of copper of that length and section. */
function cableResistance({
  resistance,
  length = 0,
  section = Number.NaN,
}: NonNullable<OperationFile['cable']>): number {
  return resistance ?? (COPPER_RESISTIVITY_20C * length) / section;
}

function buildCooling({ air_speed, h }: NonNullable<OperationFile['cooling']>): Cooling {
  return h === undefined ? { airSpeed: air_speed ?? 0 } : { h };
}

function buildTable(points: readonly (readonly [rpm: number, watt: number])[]): PrimeMover {
  return { kind: 'table', points };
}

export function buildLimits({ limits }: MachineFile): Limits {
  const { controller_voltage, winding_temperature } = limits ?? {};
  return {
    ...(controller_voltage !== undefined && { controllerVoltage: controller_voltage }),
    ...(winding_temperature !== undefined && { windingTemperature: winding_temperature }),
  };
}

/** Undefined where no price is given. */
export function buildPrices({ prices }: MachineFile): Prices | undefined {
  const { magnets, copper, steel } = prices ?? {};
  const currency = (magnets ?? copper ?? steel)?.currency;
  if (currency === undefined) return undefined;
  return {
    currency,
    ...(magnets !== undefined && { magnets: magnets.perKilogram }),
    ...(copper !== undefined && { copper: copper.perKilogram }),
    ...(steel !== undefined && { steel: steel.perKilogram }),
  };
}

export function buildMeasured({ measured }: MachineFile): Machine['measured'] {
  if (measured === undefined) return undefined;
  const { phase_emf: emf, phase_resistance, phase_inductance } = measured;
  const found: Measured = {
    ...(emf !== undefined && { phaseEmf: { speedRpm: emf.speed, order: emf.order, peak: emf.peak } }),
    ...(phase_resistance !== undefined && { phaseResistance: phase_resistance }),
    ...(phase_inductance !== undefined && { phaseInductance: phase_inductance }),
  };
  return found;
}
