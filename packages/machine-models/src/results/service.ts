import { greatestBrake, heatingRate } from '../faults/brake.js';
import { touchSpeed } from '../faults/fault-notes.js';
import type { ShortCircuit } from '../faults/short-circuit.js';
import { shortCircuit } from '../faults/short-circuit.js';
import type { ShortedMachine } from '../faults/shorted-machine.js';
import type { Inductance } from '../inductance/inductance.js';
import type { LoadPoint } from '../load/load-point.js';
import { loadPoint, loadTable, loadWarnings } from '../load/load-table.js';
import { operatingPoints } from '../load/operating-points.js';
import type { Source } from '../load/source.js';
import { phasesFromPeaks } from '../load/source.js';
import type { Circulation } from '../losses/circulation.js';
import { deltaCirculation } from '../losses/circulation.js';
import type { DragTorque } from '../losses/drag.js';
import { dragTorque, rotorSize } from '../losses/drag.js';
import type { WindingEddies } from '../losses/winding-eddies.js';
import { windingEddies } from '../losses/winding-eddies.js';
import type { WindingField } from '../losses/winding-field.js';
import type { Machine, Warning } from '../machine.js';
import type { WindingThermal } from '../thermal/winding-temperature.js';
import { windingThermal } from '../thermal/winding-temperature.js';
import { combine } from '../waves/series.js';
import { copperMass, phaseResistance } from '../winding/turn.js';
import type { Emf } from './emf.js';
import type { LoadResult, LossResult, MachineResult, ThermalResult } from './result.js';

/** What is known of the field in the winding, for the eddies in its strands. */
export interface EddyFields {
  readonly fields: readonly WindingField[];
  /** Loss in three dimensions over that of the slices. */
  readonly endShare: number;
}

/** The machine at work: on its load, its losses and its heat, and with its terminals joined. */
export interface Service {
  readonly load?: LoadResult;
  readonly losses: LossResult;
  readonly thermal?: ThermalResult;
  readonly short?: ShortCircuit;
  readonly faults: MachineResult['faults'];
  /** Current and shaft torque on the load, which a short circuit is held against. */
  readonly rated: { readonly current?: number; readonly torque?: number };
  /** Copper's first warming on a short circuit, K/s. */
  readonly warming: number;
  readonly brake: ReturnType<typeof greatestBrake>;
  /** Current that flows round a closed delta with no load, rms, A. */
  readonly roundDelta?: number;
  readonly warnings: readonly Warning[];
  /** What was taken for what the machine does not tell. */
  readonly notes: readonly string[];
}

/** Resistance, inductance and EMF as the terminals see them; measured ones in place of computed. */
export function shortedOf(machine: Machine, emf: Emf, inductance: Inductance | undefined): ShortedMachine {
  const { winding, rotor, operation, measured } = machine;
  const { phases } = winding;
  const own = measured?.phaseEmf;
  const resistance = measured?.phaseResistance ?? phaseResistance(winding, rotor.poles, winding.temperature);
  const computed = inductance?.phase.total ?? 0;
  return {
    emf: own === undefined || phases !== 3 ? emf.phases : phasesFromPeaks(own.order, own.peak),
    speedRpm: own === undefined || phases !== 3 ? operation.speedRpm : own.speedRpm,
    poles: rotor.poles,
    phases,
    connection: winding.connection,
    resistance,
    inductance: Math.max(0, measured?.phaseInductance ?? computed),
    ...(inductance !== undefined && {
      homopolarInductance: Math.max(0, inductance.self.total + (phases - 1) * inductance.mutual.total),
    }),
  };
}

function sourceOf(machine: Machine, shorted: ShortedMachine): Source {
  const { winding, operation } = machine;
  return {
    phases: shorted.emf,
    referenceRpm: shorted.speedRpm,
    poles: shorted.poles,
    phaseResistance: shorted.resistance,
    phaseInductance: shorted.inductance,
    ...(shorted.homopolarInductance !== undefined && { loopInductance: shorted.homopolarInductance }),
    connection: winding.connection,
    cableResistance: operation.cableResistance,
    conductorArea: winding.wire.strands * winding.wire.strandArea * winding.paths,
  };
}

/**
 * @param masses  of magnets and steel, for the bearings' usual friction
 * @param eddies  undefined where a slice did not converge
 */
export function describeService(
  machine: Machine,
  emf: Emf,
  inductance: Inductance | undefined,
  eddies: EddyFields | undefined,
  masses: MachineResult['masses'],
  openPeak: number,
): Service {
  const { operation, winding, rotor } = machine;
  const shorted = shortedOf(machine, emf, inductance);
  const size = rotorSize(rotor, (masses.magnets_kg ?? 0) + (masses.steel_kg ?? 0));
  const dragAt = (rpm: number): DragTorque => dragTorque(operation.drag, size, turning(rpm));
  const eddyAt = (rpm: number, temperature = winding.temperature): WindingEddies | undefined =>
    eddies && windingEddies(machine, eddies.fields, { speedRpm: rpm, temperature, endShare: eddies.endShare });
  const idle = (rpm: number): number => dragAt(rpm).loss + (eddyAt(rpm)?.loss ?? 0);
  const served = onLoad(machine, sourceOf(machine, shorted), idle);
  const point = served?.point;
  const own = eddyAt(operation.speedRpm);
  const drag = dragAt(operation.speedRpm);
  const heat =
    point === undefined
      ? undefined
      : windingThermal(machine, {
          phaseCurrent: point.phase_rms_A,
          speedRpm: operation.speedRpm,
          eddyLoss20: eddyAt(operation.speedRpm, 20)?.loss ?? 0,
        });
  // Without an inductance there is no telling what a short circuit does.
  const known = inductance !== undefined || machine.measured?.phaseInductance !== undefined;
  const short = known ? shortCircuit(shorted, operation.speedRpm) : undefined;
  const brake = known ? greatestBrake(shorted) : undefined;
  const round = roundDelta(machine, shorted);
  const touch = touchSpeed(openPeak, operation.speedRpm);
  return {
    ...(served !== undefined && { load: served.load }),
    losses: {
      ...(point !== undefined && {
        copper_W: point.copper_W,
        rectifier_W: point.rectifier_W,
        cable_W: point.cable_W,
      }),
      ...(own !== undefined && { strand_eddy_W: own.loss }),
      // On a load it is part of the copper's.
      ...(point === undefined && round !== undefined && { circulation_W: round.loss }),
      rotation_W: drag.loss,
    },
    ...(heat !== undefined && { thermal: describeHeat(heat) }),
    ...(short !== undefined && { short }),
    faults: {
      ...(short !== undefined && {
        short_circuit_A: short.phaseRms,
        short_circuit_first_peak_A: short.firstPeak,
        short_circuit_torque_Nm: short.torque,
      }),
      ...(brake !== undefined && { greatest_brake_Nm: brake.torque, greatest_brake_rpm: brake.speedRpm }),
      ...(touch !== undefined && { touch_voltage_rpm: touch }),
    },
    rated: point === undefined ? {} : { current: point.phase_rms_A, torque: served?.load.torque_Nm ?? point.torque_Nm },
    warming: short === undefined ? 0 : heatingRate(short.heat, copperMass(winding, rotor.poles)),
    brake,
    ...(round !== undefined && { roundDelta: round.current[0] }),
    warnings: [...(served?.warnings ?? []), ...(own?.warnings ?? []), ...(heat?.warnings ?? [])],
    notes: [
      ...(drag.assumed === undefined ? [] : [drag.assumed]),
      ...(heat === undefined ? [] : [`cooling of the winding: ${heat.cooling}`]),
      ...(heat?.limit.assumed === undefined ? [] : [`limit of the winding: ${heat.limit.assumed}`]),
      ...(served?.notes ?? []),
    ],
  };
}

/** Of a delta whose inductance to currents alike in all phases is known. */
function roundDelta({ winding, operation }: Machine, shorted: ShortedMachine): Circulation | undefined {
  const { homopolarInductance: inductance, resistance, poles, emf, speedRpm } = shorted;
  if (winding.connection !== 'delta' || inductance === undefined) return undefined;
  const now = operation.speedRpm / speedRpm;
  const phases = emf.map((wave) => combine([wave], [now]));
  return deltaCirculation(phases, { resistance, inductance, omega: turning(operation.speedRpm), polePairs: poles / 2 });
}

const turning = (rpm: number): number => (2 * Math.PI * rpm) / 60;

interface Served {
  readonly point: LoadPoint;
  readonly load: LoadResult;
  readonly warnings: readonly Warning[];
  readonly notes: readonly string[];
}

/** On its load; undefined without one, and for machines of other than three phases, which is told. */
function onLoad(machine: Machine, source: Source, idle: (rpm: number) => number): Served | undefined {
  const { load, speedRpm, overspeedRpm = speedRpm, primeMover } = machine.operation;
  if (load === undefined || machine.winding.phases !== 3) return undefined;
  const point = loadPoint(source, load, speedRpm);
  const table = loadTable(source, load, speedRpm, overspeedRpm);
  const shaft = (each: LoadPoint): number => each.electromagnetic_W + idle(each.speed_rpm);
  const match =
    primeMover &&
    operatingPoints(primeMover, (rpm) => shaft(loadPoint(source, load, rpm)), [table.cut_in_rpm], overspeedRpm);
  const row = (each: LoadPoint) => {
    const power = shaft(each);
    const delivered = each.dc_W ?? each.ac_W ?? 0;
    const { torque_Nm: electromagnetic, ...rest } = each;
    return {
      ...rest,
      shaft_W: power,
      torque_Nm: each.speed_rpm === 0 ? 0 : power / turning(each.speed_rpm),
      electromagnetic_torque_Nm: electromagnetic,
      efficiency: power > 0 ? delivered / power : 0,
    };
  };
  return {
    point,
    load: {
      ...row(point),
      cut_in_rpm: table.cut_in_rpm,
      table: table.rows.map(row),
      ...(table.buses.length > 0 && {
        buses: table.buses.map(({ rows, ...bus }) => ({ ...bus, rows: rows.map(row) })),
      }),
      ...(match !== undefined && { prime_mover: { outcome: match.outcome, points: match.points } }),
    },
    warnings: loadWarnings(table, point),
    notes: match?.notes ?? [],
  };
}

function describeHeat(heat: WindingThermal): ThermalResult {
  return {
    ...(heat.winding !== undefined && { winding_C: heat.winding }),
    ...(heat.middle !== undefined && { winding_middle_C: heat.middle }),
    limit_C: heat.limit.temperature,
    continuous_A: heat.continuousCurrent,
    overloads: heat.overloads.flatMap(({ times, current, fromCold }) =>
      Number.isFinite(fromCold) ? [{ times, current_A: current, from_cold_s: fromCold }] : [],
    ),
  };
}
