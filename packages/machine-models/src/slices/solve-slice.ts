import type { AdaptiveSolution, Field, Goal, Locator, RecoveredGradient } from '@gapwright/fem-core';
import {
  buildLocator,
  energiesOf,
  exceededIn,
  measureMesh,
  nodeCount,
  solveAdaptively,
  stressFunctional,
  stressThrough,
  triangleCount,
  valueAt,
  weightedIntegral,
} from '@gapwright/fem-core';
import type { Machine } from '../machine.js';
import { legSpreadFactor } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';
import { midPlaneHarmonics, oddOrders, windingHarmonics } from './gap-harmonics.js';
import type { Cuts, PoleSection } from './pole-section.js';
import { buildPoleSection } from './pole-section.js';
import type { SliceAnswer } from './slice-answer.js';

/** Orders kept of the field in the winding: beyond them a leg's average holds less than 1e-5 of the fundamental. */
const WINDING_ORDERS = oddOrders(25);
const MID_ORDERS = oddOrders(6);
/** Orders whose errors steer the mesh. */
const STEERING_ORDERS = oddOrders(3);

export interface SliceOptions {
  /** Wanted relative error of the leg flux density; the machine's own where absent. */
  readonly accuracy?: number;
  /** Planes to cut along; all that the machine allows where absent. */
  readonly cuts?: Cuts;
  readonly onMesh?: (progress: { readonly mesh: number; readonly triangles: number; readonly error: number }) => void;
}

/** A solved slice with the field it came from. */
export interface SolvedSlice {
  readonly answer: SliceAnswer;
  readonly field: Field;
  /** The gradient of A as recovered for the error estimate, smoother and nearer the truth than the elements' own. */
  readonly recovered: RecoveredGradient;
  readonly pole: PoleSection;
}

/** Solves the machine's slice at one radius. `weight` is handed through to the answer. */
export function solveSlice(
  machine: Machine,
  slice: { readonly radius: number; readonly weight: number },
  options: SliceOptions = {},
): SolvedSlice {
  const pole = buildPoleSection(machine, slice.radius, options.cuts);
  const solution = solveAdaptively(pole.section, pole.setup, {
    goals: [...STEERING_ORDERS.map((order) => harmonicGoal(pole, order)), pullGoal(pole)],
    weights: ([first]) => {
      const leg = legCut(machine.winding, machine.rotor.poles, machine.rotor.magnets.meanRadius, slice.radius);
      const factor = (order: number): number => Math.abs(legSpreadFactor(leg.width, pole.polePitch, order));
      const scale = Math.abs(first) * factor(1);
      return [...STEERING_ORDERS.map((order) => factor(order) / scale), 0];
    },
    accuracy: options.accuracy ?? machine.model.accuracy,
    ...(options.onMesh === undefined ? {} : { onMesh: options.onMesh }),
  });
  return {
    answer: describeSlice(slice, pole, solution),
    field: solution.field,
    recovered: solution.estimate.recovered,
    pole,
  };
}

/** Amplitude of an odd order of By averaged over the winding: -(2 k/(polePitch t)) integral of A sin(k x) over a whole pole. */
function harmonicGoal(pole: PoleSection, order: number): Goal {
  const k = (order * Math.PI) / pole.polePitch;
  const height = pole.windingTo - pole.windingFrom;
  const share = pole.cuts.magnetAxis ? 2 : 1; // the half pole stands for both; the mean over the thickness needs no factor
  const factor = (-2 * k * share) / (pole.polePitch * height);
  return {
    name: `winding By order ${order}`,
    functional: (field) => weightedIntegral(field.mesh, ['winding'], (x) => factor * Math.sin(k * x)),
  };
}

/** Pull on the upper disc with its magnets, towards the lower, by the stress averaged through the winding's space. */
function pullGoal(pole: PoleSection): Goal {
  const share = pole.cuts.magnetAxis ? 2 : 1;
  const slope = (): readonly [number, number] => [0, share / (pole.windingTo - pole.windingFrom)];
  return {
    name: 'pull',
    functional: (field) => stressFunctional(field, ['winding'], slope).map((g) => -g),
    value: (field) => -stressThrough(field, ['winding'], slope).fy,
  };
}

function describeSlice(
  slice: { readonly radius: number; readonly weight: number },
  pole: PoleSection,
  solution: AdaptiveSolution,
): SliceAnswer {
  const { field, values, bounds, estimate } = solution;
  const locator = buildLocator(field.mesh);
  const pull = values[STEERING_ORDERS.length];
  const { energy } = energiesOf(field);
  return {
    radius: slice.radius,
    weight: slice.weight,
    polePitch: pole.polePitch,
    midB: midPlaneHarmonics(field, locator, pole, MID_ORDERS),
    windingB: windingHarmonics(field, locator, pole, WINDING_ORDERS),
    windingBErr: bounds.slice(0, STEERING_ORDERS.length),
    pull,
    pullRelErr: pull === 0 ? 0 : bounds[STEERING_ORDERS.length] / Math.abs(pull),
    energy: pole.copies * energy,
    energyRelErr: estimate.energy / energy,
    discB: discFluxDensity(field, locator, pole),
    peakSteelB: pole.steelRegions.length === 0 ? undefined : exceededIn(field, pole.steelRegions, 0.01),
    mesh: {
      nodes: nodeCount(field.mesh),
      triangles: triangleCount(field.mesh),
      minAngleDeg: measureMesh(field.mesh).minAngleDeg,
    },
    newtonSteps: field.report.steps,
    newtonStepsTotal: solution.newtonSteps,
    meshes: solution.meshes,
    converged: field.report.converged,
    residuals: field.report.residuals,
    accurate: solution.accurate,
  };
}

/** Mean flux density along the disc in its cut midway between two poles: |A(face) - A(back)| / thickness. */
function discFluxDensity(field: Field, locator: Locator, pole: PoleSection): number | undefined {
  if (pole.discFaces === undefined) return undefined;
  const [face, back] = pole.discFaces;
  const [a, b] = [face, back].map((y) => valueAt(field, locator, pole.to, y)?.a ?? Number.NaN);
  return Math.abs(a - b) / (back - face);
}
