import { computeDemagnetisation } from './demagnetisation/demagnetisation.js';
import { computeEndFactor } from './end-effect/end-factor.js';
import { shortCircuitPath } from './faults/rotor-current.js';
import { computeInductance } from './inductance/inductance.js';
import { endShare } from './losses/end-share.js';
import { windingField } from './losses/winding-field.js';
import type { Machine } from './machine.js';
import { solveApproach } from './mechanics/approach.js';
import type { Findings } from './results/assemble.js';
import { computeEmf, endsOf } from './results/emf.js';
import { effectiveWave, lineWave } from './results/leg-wave.js';
import { shortedOf } from './results/service.js';
import type { SliceRadius } from './rotor/slice-radii.js';
import { autoRadii, FINEST_LEVEL } from './rotor/slice-radii.js';
import type { SliceAnswer } from './slices/slice-answer.js';
import type { SolvedSlice } from './slices/solve-slice.js';
import { solveSlice } from './slices/solve-slice.js';
import { peak } from './waves/series.js';

/** All slices of a machine, by rising radius. */
export interface SolvedSlices {
  readonly slices: readonly SolvedSlice[];
  /** Of `radii: auto`. */
  readonly refined?: {
    /** Last relative change of the effective leg flux density, phase or line, from one choice of radii to the next. */
    readonly change: number;
    /** That is within the wanted accuracy. */
    readonly settled: boolean;
  };
}

/**
 * Solves the slices one after another; each is handed out as it is done. With `radii: auto` finer choices of radii follow
 * until the effective leg flux density changes by less than the wanted accuracy; radii that come again are not solved again.
 * What follows from the slices does not depend on the order in which they were solved.
 */
export function* sliceSteps(machine: Machine): Generator<SolvedSlice, SolvedSlices> {
  const { model, rotor } = machine;
  let slices = yield* solveAll(machine, model.slices, []);
  if (!model.auto) return { slices };
  for (let level = 1; ; level++) {
    const finer = yield* solveAll(machine, autoRadii(rotor.magnets, level), slices);
    const change = changeOfFlux(machine, slices, finer);
    slices = finer;
    const settled = change <= model.accuracy;
    const failed = slices.some(({ answer }) => !answer.converged);
    if (settled || failed || level === FINEST_LEVEL) return { slices, refined: { change, settled } };
  }
}

function* solveAll(
  machine: Machine,
  radii: readonly SliceRadius[],
  known: readonly SolvedSlice[],
): Generator<SolvedSlice, readonly SolvedSlice[]> {
  const slices: SolvedSlice[] = [];
  for (const slice of radii) {
    const before = known.find(({ answer }) => answer.radius === slice.radius);
    if (before !== undefined) {
      slices.push({ ...before, answer: { ...before.answer, weight: slice.weight } });
      continue;
    }
    const solved = solveSlice(machine, slice);
    yield solved;
    slices.push(solved);
  }
  return slices;
}

/** The larger of the relative changes of the peaks of phase and line. */
function changeOfFlux(machine: Machine, before: readonly SolvedSlice[], after: readonly SolvedSlice[]): number {
  const peaks = (slices: readonly SolvedSlice[]): readonly number[] => {
    const answers: readonly SliceAnswer[] = slices.map(({ answer }) => answer);
    const phase = effectiveWave(machine, answers);
    return [peak(phase.series), peak(lineWave(phase, machine.winding.phases).series)];
  };
  const [old, now] = [peaks(before), peaks(after)];
  return Math.max(...now.map((value, i) => (value === 0 ? 0 : Math.abs(old[i] / value - 1))));
}

/** All that `describeMachine` wants to know, from the solved slices; the fields are not needed any more. */
export function findAll(machine: Machine, { slices, refined }: SolvedSlices): Findings {
  const answers = slices.map(({ answer }) => answer);
  const endFactor = computeEndFactor(machine, answers[Math.floor(answers.length / 2)]?.discB);
  const solved = answers.every(({ converged }) => converged); // else there is no permeability to freeze
  if (!solved) return { slices: answers, refined, endFactor };
  const inductance = computeInductance(machine, slices);
  const emf = computeEmf(machine, answers, endsOf(machine, endFactor));
  const path = shortCircuitPath(shortedOf(machine, emf, inductance), machine.operation.speedRpm);
  return {
    slices: answers,
    refined,
    endFactor,
    inductance,
    eddies: {
      fields: slices.map((slice) => windingField(machine, slice)),
      endShare: machine.model.endCorrection ? endShare(machine) : 1,
    },
    approach: solveApproach(machine, answers),
    demagnetisation: computeDemagnetisation(machine, slices, path),
  };
}
