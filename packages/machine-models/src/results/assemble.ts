import type { Demagnetisation } from '../demagnetisation/demagnetisation.js';
import type { EndFactor } from '../end-effect/end-factor.js';
import { controllerWarning } from '../faults/fault-notes.js';
import type { Inductance } from '../inductance/inductance.js';
import type { Machine, Warning } from '../machine.js';
import type { Approach } from '../mechanics/approach.js';
import { describeMechanics } from '../mechanics/mechanics.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import type { Harmonics } from '../waves/series.js';
import { amplitudeOf } from '../waves/series.js';
import { findCautions, overspeedPeak } from './cautions.js';
import { circulatingEmf, computeEmf, describeEmf, endsOf, rectifiedPeak } from './emf.js';
import { harmonicBound, relative } from './error-bounds.js';
import { describeEffectiveB, describeLeg } from './leg-wave.js';
import { describeMagnets, describeMargin } from './magnets.js';
import { describeMasses, describePull, describeTotal, mapMechanics } from './mechanical.js';
import { describeMerit } from './merit.js';
import type { HarmonicsResult, MachineResult, SliceResult } from './result.js';
import type { EddyFields } from './service.js';
import { describeService } from './service.js';
import { describeWinding } from './winding-figures.js';

/** What only the caller knows of a run. */
export interface RunStamp {
  /** Version of the program, `0.1.0`. */
  readonly version: string;
  /** SHA-256 of the machine file with what was set over it, in hexadecimal digits. */
  readonly inputSha256: string;
}

/** What the models found of a machine. */
export interface Findings {
  /** By rising radius; their weights integrate over the magnets' radial length. */
  readonly slices: readonly SliceAnswer[];
  /** Of `radii: auto`: last relative change of the effective leg flux density, and whether it is within the accuracy. */
  readonly refined?: { readonly change: number; readonly settled: boolean } | undefined;
  readonly endFactor?: EndFactor | undefined;
  readonly inductance?: Inductance | undefined;
  readonly eddies?: EddyFields | undefined;
  readonly approach?: Approach | undefined;
  readonly demagnetisation?: Demagnetisation | undefined;
}

/**
 * Result of a machine from its solved slices: EMF, effective flux density, winding, merit, pull, masses, cautions. The
 * error twins bound what the mesh does; see `error-bounds.ts`.
 *
 * @param warnings  of the reader; a slice that did not converge or missed the wanted accuracy adds its own
 */
export function describeMachine(
  machine: Machine,
  { slices, refined, endFactor, inductance, eddies, approach, demagnetisation }: Findings,
  warnings: readonly Warning[],
  stamp: RunStamp,
): MachineResult {
  const emf = describeEmf(machine, slices, endFactor);
  const effectiveB = describeEffectiveB(machine, slices);
  const winding = describeWinding(machine, inductance);
  const pull = describePull(machine, slices);
  const mechanics = describeMechanics(machine, slices, approach);
  const masses = describeMasses(machine);
  const waves = computeEmf(machine, slices, endsOf(machine, endFactor));
  const openPeak = rectifiedPeak(waves);
  const service = describeService(machine, waves, inductance, eddies, masses, openPeak);
  const figures = { emf, winding, mechanical: pull, openPeak, circulatingEmf: circulatingEmf(waves), service };
  const overspeed = overspeedPeak(machine, openPeak);
  return {
    format: 'gapwright-result/1',
    gapwright: stamp.version,
    machine: machine.name,
    input_sha256: stamp.inputSha256,
    slices: slices.map((slice) => describeSlice(machine, slice, legInductance(slice, inductance))),
    emf,
    effective_B: effectiveB,
    winding,
    merit: describeMerit(machine, emf, effectiveB),
    magnets: { ...describeMagnets(machine), ...describeMargin(demagnetisation) },
    ...(service.load !== undefined && { load: service.load }),
    losses: service.losses,
    ...(service.thermal !== undefined && { thermal: service.thermal }),
    faults: { ...(overspeed !== undefined && { overspeed_dc_peak_V: overspeed }), ...service.faults },
    mechanical: { ...pull, ...mapMechanics(mechanics) },
    masses: { ...masses, resin_kg: mechanics.resin.mass },
    ...(machine.prices !== undefined && { costs: describeTotal(machine, machine.prices, masses) }),
    notes: [...service.notes, ...mechanics.notes, ...mechanics.leftOut.map(({ key, text }) => `${key}: ${text}`)],
    cautions: findCautions(machine, figures),
    warnings: [
      ...warnings,
      ...slices.flatMap((slice, i) => sliceWarnings(machine, slice, i)),
      ...saturation(slices),
      ...unsettled(machine, refined),
      ...(machine.model.endCorrection ? (endFactor?.warnings ?? []) : []),
      ...(inductance?.warnings ?? []),
      ...service.warnings,
      ...controllerRoom(machine, overspeed),
      ...(demagnetisation?.warnings ?? []),
      ...mechanics.warnings,
    ],
  };
}

function controllerRoom({ limits }: Machine, overspeed: number | undefined): readonly Warning[] {
  if (overspeed === undefined || limits.controllerVoltage === undefined) return [];
  const warning = controllerWarning(overspeed, limits.controllerVoltage);
  return warning === undefined ? [] : [warning];
}

/** On the mid-plane and averaged over the winding an order has one relative error: the shape between them is exact. */
function describeHarmonics(slice: SliceAnswer, { order, amplitude }: Harmonics): HarmonicsResult {
  const errors = order.map((n) => relative(harmonicBound(slice, n), amplitudeOf(slice.windingB, n)));
  return { order, amplitude_T: amplitude, amplitude_T_rel_err: errors };
}

/** Of overlapped windings. */
function legInductance(slice: SliceAnswer, inductance: Inductance | undefined): SliceResult['leg_inductance'] {
  const leg = inductance?.slices.find(({ radius }) => radius === slice.radius)?.leg;
  if (leg === undefined) return undefined;
  const { self, mutual } = leg;
  return {
    self_H_per_m: self.value,
    self_H_per_m_rel_err: relative(self.error, self.value),
    mutual_H_per_m: mutual.value,
    mutual_H_per_m_rel_err: relative(mutual.error, mutual.value),
  };
}

function describeSlice(machine: Machine, slice: SliceAnswer, leg: SliceResult['leg_inductance']): SliceResult {
  return {
    radius_m: slice.radius,
    pole_pitch_m: slice.polePitch,
    mid_B: describeHarmonics(slice, slice.midB),
    winding_B: describeHarmonics(slice, slice.windingB),
    ...describeLeg(machine, slice),
    pull_N_per_m_pole: slice.pull,
    pull_N_per_m_pole_rel_err: slice.pullRelErr,
    energy_J_per_m_pole: slice.energy,
    energy_J_per_m_pole_rel_err: slice.energyRelErr,
    ...(leg !== undefined && { leg_inductance: leg }),
    ...(slice.discB !== undefined && { disc_B_T: slice.discB }),
    ...(slice.peakSteelB !== undefined && { peak_steel_B_T: slice.peakSteelB }),
    mesh: { nodes: slice.mesh.nodes, triangles: slice.mesh.triangles, min_angle_deg: slice.mesh.minAngleDeg },
    newton_steps: slice.newtonSteps,
  };
}

/** Mean flux density in a disc above which plates of mild steel saturate, T; common practice 1.6 to 1.8. */
const SATURATED = 1.8;

function saturation(slices: readonly SliceAnswer[]): readonly Warning[] {
  const most = Math.max(...slices.map(({ discB }) => discB ?? 0));
  if (!(most > SATURATED)) return [];
  const text =
    `the discs carry up to ${most.toFixed(2)} T midway between poles: they saturate, which costs voltage and lets field ` +
    'out behind them; thicker discs or smaller magnets would help';
  return [{ key: 'rotor.disc.thickness', text }];
}

function unsettled({ model }: Machine, refined: Findings['refined']): readonly Warning[] {
  if (refined === undefined || refined.settled) return [];
  const text =
    `the leg's flux still changes by ${(100 * refined.change).toPrecision(2)} % with the finest choice of radii, wanted ` +
    `${(100 * model.accuracy).toPrecision(2)} %`;
  return [{ key: 'model.radii', text }];
}

function sliceWarnings(machine: Machine, slice: SliceAnswer, index: number): readonly Warning[] {
  const key = `slices[${index}]`;
  const where = `the slice at ${(slice.radius * 1000).toFixed(1)} mm`;
  if (!slice.converged) {
    return [
      {
        key,
        text: `${where} did not converge in ${slice.newtonSteps} Newton steps${slice.failure === undefined ? '' : ` (${slice.failure})`}; its figures are not to be used`,
      },
    ];
  }
  if (slice.accurate) return [];
  const wanted = `${(100 * machine.model.accuracy).toPrecision(2)} %`;
  return [{ key, text: `${where} did not reach the wanted accuracy of ${wanted}; see leg_B_rel_err` }];
}
