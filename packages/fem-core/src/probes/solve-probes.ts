import { checkSetup } from '../assembly/check-setup.js';
import type { Setup } from '../assembly/setup.js';
import type { System } from '../assembly/system.js';
import { numberUnknowns } from '../assembly/unknowns.js';
import { checkAll } from '../base/fault.js';
import type { Steps } from '../base/steps.js';
import { finish } from '../base/steps.js';
import type { Field } from '../field/field.js';
import { buildLocator } from '../field/locate.js';
import type { Section } from '../geometry/section.js';
import type { Mesh } from '../mesh/mesh.js';
import { meshSection } from '../mesh/mesh-section.js';
import type { AdaptiveSolution, GoalAt, MeshProgress, SolveProgress } from '../pipeline.js';
import { adaptiveSteps, limitsFor } from '../pipeline.js';
import type { NewtonOptions } from '../solve/newton.js';
import type { Tangent } from '../solve/tangent.js';
import { checkProbes, checkProbesOn } from './check-probes.js';
import { energyGoals } from './goals.js';
import type { Answer, Probe } from './probe.js';
import type { ProbeAt } from './probe-at.js';
import { probeAt } from './probe-at.js';

/** How accurate, and how far to go for it. */
export interface ProbeOptions {
  /**
   * Wanted relative error of energy, linkages, fluxes, forces and means, each against the largest of its kind; points and
   * lines, and torques, only report their estimate. 0.002 if absent.
   */
  readonly accuracy?: number;
  /** Of the elements: 1 linear, 2 quadratic (if absent). */
  readonly order?: 1 | 2;
  /** Meshes tried at most; 12 if absent. */
  readonly maxMeshes?: number;
  /** Triangles from which on no finer mesh is tried; 200,000 if absent. */
  readonly maxTriangles?: number;
  /** Of each solve. */
  readonly newton?: NewtonOptions;
  /** Called after each mesh is solved. */
  readonly onMesh?: (progress: MeshProgress) => void;
}

/** A solved section with its answers. */
export interface SectionAnswer {
  /** On the last mesh; `field.report` tells whether it converged. */
  readonly field: Field;
  /** Gradient of A recovered to superconvergent accuracy, Float64Array(12 m). */
  readonly recovered: Float64Array;
  /** In the order of the probes. */
  readonly answers: readonly Answer[];
  /** J/m; in unbounded space of all of it, and NaN where the currents there do not cancel: it has no bound then. */
  readonly energy: number;
  /** J/m: integral of H . B less the energy; NaN where that is. */
  readonly coenergy: number;
  /** Bound of the energy's error, J/m. */
  readonly energyError: number;
  /** Bound of the coenergy's error, J/m. */
  readonly coenergyError: number;
  /** Largest relative error of all that the accuracy binds. */
  readonly error: number;
  /** The solve converged, and the wanted accuracy was met. */
  readonly accurate: boolean;
  /** How many were solved on. */
  readonly meshes: number;
  /** Over all meshes. */
  readonly newtonSteps: number;
  /** Of the last mesh: what further solves on it can use, such as those of an inductance. */
  readonly system: System;
  /** At the solution; undefined where the solve failed before the first. */
  readonly tangent: Tangent | undefined;
}

/**
 * Solves a section until energy, linkages, fluxes, forces and means are as accurate as wanted, or a limit is reached.
 * @throws InputError for drawings that cannot be meshed, setups that do not fit, and probes that ask for what is not there; a
 * solve that does not converge, or an accuracy not met, is told in the answer
 */
export function solveProbes(
  section: Section,
  setup: Setup,
  probes: readonly Probe[],
  options: ProbeOptions = {},
): SectionAnswer {
  return finish(probeSteps(section, setup, probes, options));
}

/**
 * Refuses what `solveProbes` refuses, all of it at once and without solving.
 * @returns the mesh that would be solved on first
 * @throws InputError
 */
export function checkProblem(
  section: Section,
  setup: Setup,
  probes: readonly Probe[],
  { accuracy = USUAL_ACCURACY, order, maxTriangles }: ProbeOptions = {},
): Mesh {
  checkProbes(section, probes, accuracy);
  const mesh = meshSection(section, limitsFor(maxTriangles));
  checkAll(
    () => checkSetup(mesh, setup),
    () => numberUnknowns(mesh, setup, order),
    () => checkProbesOn({ mesh, setup }, probes),
  );
  return mesh;
}

/** `solveProbes` step by step: told after each Newton step and each mesh, and within long meshing. */
export function* probeSteps(
  section: Section,
  setup: Setup,
  probes: readonly Probe[],
  options: ProbeOptions = {},
): Steps<SolveProgress, SectionAnswer> {
  const { accuracy = USUAL_ACCURACY } = options;
  checkProbes(section, probes, accuracy);
  let wanted: readonly ProbeAt[] = [];
  const solution = yield* adaptiveSteps(section, setup, {
    ...options,
    accuracy,
    combine: 'largest',
    goals: (field) => {
      if (wanted.length === 0) checkProbesOn(field, probes); // on the first mesh
      const locator = buildLocator(field.mesh);
      wanted = probes.map((probe) => probeAt(probe, field, locator));
      return [...energyGoals(field, inverse), ...goalsOf(wanted)];
    },
  });
  return answer(solution, wanted);
}

/** Wanted where nothing is said. */
const USUAL_ACCURACY = 0.002;

const inverse = (size: number): number => (size === 0 ? 0 : 1 / Math.abs(size));

/** Each figure is weighed against the largest of its kind. */
function goalsOf(wanted: readonly ProbeAt[]): GoalAt[] {
  const largest = new Map<Probe['kind'], number>();
  for (const { kind, figures } of wanted) {
    for (const { size = 0 } of figures) largest.set(kind, Math.max(size, largest.get(kind) ?? 0));
  }
  return wanted.flatMap(({ kind, figures }) =>
    figures.map(({ size, ...goal }) => ({ ...goal, weight: size === undefined ? 0 : inverse(largest.get(kind) ?? 0) })),
  );
}

function answer(solution: AdaptiveSolution, wanted: readonly ProbeAt[]): SectionAnswer {
  const { field, values, bounds, estimate } = solution;
  let at = 2; // behind energy and coenergy
  const answers = wanted.map(({ figures, describe }) => {
    at += figures.length;
    return describe(bounds.slice(at - figures.length, at), estimate.recovered);
  });
  return {
    field,
    recovered: estimate.recovered,
    answers,
    energy: values[0],
    coenergy: values[1],
    energyError: bounds[0],
    coenergyError: bounds[1],
    error: solution.error,
    accurate: solution.accurate,
    meshes: solution.meshes,
    newtonSteps: solution.newtonSteps,
    system: solution.system,
    tangent: solution.tangent,
  };
}
