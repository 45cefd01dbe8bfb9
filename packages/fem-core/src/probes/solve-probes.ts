import type { Setup } from '../assembly/setup.js';
import type { Field } from '../field/field.js';
import type { Section } from '../geometry/section.js';
import type { Answer, Probe } from './probe.js';

export interface ProbeOptions {
  /**
   * Wanted relative error of energy, linkages, fluxes, forces and means, each against the largest of its kind; points and
   * lines only report their estimate.
   */
  readonly accuracy: number;
  readonly maxMeshes?: number;
  readonly maxTriangles?: number;
  readonly onMesh?: (progress: { readonly mesh: number; readonly triangles: number; readonly error: number }) => void;
  /** Stops between meshes and Newton steps once `aborted` is true (an `AbortSignal` serves). */
  readonly signal?: { readonly aborted: boolean };
}

export interface SectionAnswer {
  readonly field: Field;
  /** Gradient of A recovered to superconvergent accuracy, Float64Array(12 m). */
  readonly recovered: Float64Array;
  /** In the order of the probes. */
  readonly answers: readonly Answer[];
  /** J/m, with the bound of its error. */
  readonly energy: number;
  readonly coenergy: number;
  readonly energyError: number;
  /** Largest relative error of all that the accuracy binds. */
  readonly error: number;
  readonly accurate: boolean;
  readonly meshes: number;
  readonly newtonSteps: number;
}

/** Solves a section to the wanted accuracy of its probes. */
export function solveProbes(
  _section: Section,
  _setup: Setup,
  _probes: readonly Probe[],
  _options: ProbeOptions,
): SectionAnswer {
  throw new Error('not built yet');
}
