import type { Field, Locator } from '@gapwright/fem-core';
import { buildLocator, energiesOf, valueAt } from '@gapwright/fem-core';
import { exceededIn } from '@gapwright/fem-core/field';
import type { AdaptiveSolution, Goal, RecoveredGradient } from '@gapwright/fem-core/goals';
import { solveAdaptively, stressFunctional, stressThrough } from '@gapwright/fem-core/goals';
import { measureMesh, nodeCount, triangleCount } from '@gapwright/fem-core/mesh';
import type { Machine } from '../machine.js';
import { peak } from '../waves/series.js';
import { legSpreadFactor } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';
import { midPlaneShare, oddOrders, ordersThatMatter, windingFunctional } from './gap-harmonics.js';
import type { Cuts, PoleSection } from './pole-section.js';
import { buildPoleSection } from './pole-section.js';
import type { SliceAnswer } from './slice-answer.js';

/** Orders told of the field on the mid-plane. */
const MID_ORDERS = oddOrders(6);
/** An order that may bring less than this share of the wanted error is left out. */
const NEGLIGIBLE = 0.02;

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
  const accuracy = options.accuracy ?? machine.model.accuracy;
  const { width } = legCut(machine.winding, machine.rotor.poles, machine.rotor.magnets.meanRadius, slice.radius);
  const orders = ordersThatMatter(machine, pole, width, NEGLIGIBLE * accuracy);
  const spread = orders.map((order) => legSpreadFactor(width, pole.polePitch, order));
  const solution = solveAdaptively(pole.section, pole.setup, {
    goals: [...orders.map((order) => harmonicGoal(pole, order)), pullGoal(pole)],
    // The error of a leg's wave at any angle, over the wave's peak: the leg_B_rel_err of the results.
    weights: (values) => {
      const leg = { order: orders, cos: spread.map((f, i) => f * values[i]), sin: orders.map(() => 0) };
      const scale = peak(leg);
      // A radius at the very end of round magnets has no field at all.
      return [...spread.map((f) => (scale === 0 ? 0 : Math.abs(f) / scale)), 0];
    },
    accuracy,
    ...(options.onMesh === undefined ? {} : { onMesh: options.onMesh }),
  });
  return {
    answer: describeSlice(slice, pole, orders, solution),
    field: solution.field,
    recovered: solution.estimate.recovered,
    pole,
  };
}

function harmonicGoal(pole: PoleSection, order: number): Goal {
  return { name: `winding By order ${order}`, functional: ({ mesh }) => windingFunctional(mesh, pole, order) };
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
  orders: readonly number[],
  solution: AdaptiveSolution,
): SliceAnswer {
  const { field, values, bounds, estimate } = solution;
  const locator = buildLocator(field.mesh);
  const pull = values[orders.length];
  const mid = MID_ORDERS.map((order, i) => values[i] * midPlaneShare(pole, order));
  const { energy } = energiesOf(field);
  return {
    radius: slice.radius,
    weight: slice.weight,
    polePitch: pole.polePitch,
    midB: { order: MID_ORDERS, amplitude: mid },
    windingB: { order: orders, amplitude: values.slice(0, orders.length) },
    windingBErr: bounds.slice(0, orders.length),
    pull,
    pullRelErr: pull === 0 ? 0 : bounds[orders.length] / Math.abs(pull),
    energy: pole.copies * energy,
    energyRelErr: energy === 0 ? 0 : estimate.energy / energy,
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
    ...(field.report.failure === undefined ? {} : { failure: field.report.failure }),
    residuals: field.report.residuals,
    accurate: solution.accurate,
  };
}

/**
 * Mean flux density along the disc in its cut midway between two poles: |A(face) - A(back)| / thickness; the larger one
 * where there are a disc and a keeper.
 */
function discFluxDensity(field: Field, locator: Locator, pole: PoleSection): number | undefined {
  if (pole.discCuts.length === 0) return undefined;
  const means = pole.discCuts.map(([face, back]) => {
    const [a, b] = [face, back].map((y) => valueAt(field, locator, pole.to, y)?.a ?? Number.NaN);
    return Math.abs((a - b) / (back - face));
  });
  return Math.max(...means);
}
