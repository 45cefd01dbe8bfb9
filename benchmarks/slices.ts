import { buildLocator } from '@gapwright/fem-core';
import type { System } from '@gapwright/fem-core/equations';
import { assemble, buildSystem, numberUnknowns, placementOf } from '@gapwright/fem-core/equations';
import { estimateGoalErrors, stressFunctional, weightedIntegral } from '@gapwright/fem-core/goals';
import type { Mesh, SolvedField } from '@gapwright/fem-core/mesh';
import { meshSection, refineMesh, solveOnMesh, triangleCount } from '@gapwright/fem-core/mesh';
import type { Factor, NotPositive } from '@gapwright/fem-core/sparse';
import { analyse, chooseOrder, factor, solve } from '@gapwright/fem-core/sparse';
import type { Machine, PoleSection, SolvedSlice } from '@gapwright/machine-models';
import { solveSlice } from '@gapwright/machine-models';
import { median, ms, printTable, timed } from './timing.js';

/** The demo's slices within this process: the very first time, warm, and where the time goes. */
export function benchSlices(machine: Machine): void {
  const { slices, accuracy } = machine.model;
  console.log(`\n${machine.name}: ${slices.length} slices at ${100 * accuracy} %, in process`);
  const solveAll = (): SolvedSlice[] => slices.map((slice) => solveSlice(machine, slice));
  const cold = timed(solveAll);
  const single: number[][] = slices.map(() => []);
  const all: number[] = [];
  for (let run = 0; run < 18; run++) {
    const times = slices.map((slice) => timed(() => solveSlice(machine, slice)).ms);
    if (run < 3) continue; // still warming up
    times.forEach((time, i) => {
      single[i].push(time);
    });
    all.push(times.reduce((sum, time) => sum + time, 0));
  }
  printTable([
    ['radius, mm', 'warm, ms', 'nodes', 'triangles', 'meshes', 'Newton steps', 'of them on the last', 'leg By_1, T'],
    ...cold.result.map(({ answer }, i) => [
      (1000 * answer.radius).toFixed(1),
      ms(median(single[i])),
      `${answer.mesh.nodes}`,
      `${answer.mesh.triangles}`,
      `${answer.meshes}`,
      `${answer.newtonStepsTotal}`,
      `${answer.newtonSteps}`,
      answer.windingB.amplitude[0].toFixed(6),
    ]),
  ]);
  const warm = median(all);
  console.log(`  together: first time ${ms(cold.ms)} ms, warm ${ms(warm)} ms (median of ${all.length})`);
  printStages(machine, cold.result);
}

const STAGES = ['mesh', 'assembly', 'ordering', 'analysis', 'factor', 'solve', 'estimate'] as const;
type Times = Record<(typeof STAGES)[number], number>;

/**
 * Shares of the stages, each timed by itself on the first and the last mesh of every slice (what lies between, where a
 * slice needed more than two, counts to the rest).
 */
function printStages(machine: Machine, solved: readonly SolvedSlice[]): void {
  const runs: (Times & { total: number })[] = [];
  for (let run = 0; run < 18; run++) {
    const sum = { mesh: 0, assembly: 0, ordering: 0, analysis: 0, factor: 0, solve: 0, estimate: 0, total: 0 };
    machine.model.slices.forEach((slice, i) => {
      addStages(solved[i], sum);
      sum.total += timed(() => solveSlice(machine, slice)).ms; // in turn, so that both see the same moments
    });
    if (run >= 3) runs.push(sum);
  }
  const total = median(runs.map((times) => times.total));
  const rest = median(runs.map((times) => STAGES.reduce((left, stage) => left - times[stage], times.total)));
  const row = (name: string, time: number): string[] => [name, ms(time), `${((100 * time) / total).toFixed(0)} %`];
  printTable([
    [`stage, all ${machine.model.slices.length} slices`, 'ms', 'share'],
    ...STAGES.map((stage) => row(stage, median(runs.map((times) => times[stage])))),
    row('answers and the rest', rest),
  ]);
}

function addStages({ pole, field, answer }: SolvedSlice, sum: Times): void {
  const clock = <T>(stage: keyof Times, work: () => T): T => {
    const { ms: time, result } = timed(work);
    sum[stage] += time;
    return result;
  };
  const first = clock('mesh', () => meshSection(pole.section));
  const earlier = answer.newtonStepsTotal - answer.newtonSteps;
  if (answer.meshes > 1) {
    addPass(pole, first, Math.round(earlier / (answer.meshes - 1)), clock);
    const wanted = sizesOf(first, field.mesh);
    const last = clock('mesh', () => refineMesh(first, wanted));
    addPass(pole, last, answer.newtonSteps, clock);
  } else addPass(pole, first, answer.newtonSteps, clock);
}

function positive(made: Factor | NotPositive): Factor {
  if ('blocks' in made) return made;
  throw new Error('the tangent is not positive definite');
}

/** One mesh, from its system to its estimate, with the given number of Newton steps. */
function addPass(
  pole: PoleSection,
  mesh: Mesh,
  steps: number,
  clock: <T>(stage: keyof Times, work: () => T) => T,
): void {
  const system = clock('assembly', () => buildSystem(mesh, pole.setup, numberUnknowns(mesh, pole.setup)));
  const order = clock('ordering', () => chooseOrder(system.pattern, placementOf(mesh, system.unknowns)));
  const analysis = clock('analysis', () => analyse(system.pattern, order));
  const solution = solveOnMesh(mesh, pole.setup, { analysis });
  const tangent = new Float64Array(system.pattern.row.length);
  const residual = new Float64Array(system.pattern.n);
  assemble(system, solution.field.potential, residual, tangent);
  let factored = positive(factor(analysis, tangent));
  // A step costs a factor, a solve, and two assemblies, one of them with the tangent; one more begins.
  clock('assembly', () => {
    for (let i = 0; i <= steps; i++) assemble(system, solution.field.potential, residual, tangent);
    for (let i = 0; i < steps; i++) assemble(system, solution.field.potential, residual);
  });
  clock('factor', () => {
    for (let i = 0; i < steps; i++) factored = positive(factor(analysis, tangent, { reuse: factored }));
  });
  clock('solve', () => {
    for (let i = 0; i < steps; i++) solve(factored, residual, new Float64Array(system.pattern.n));
  });
  clock('estimate', () => estimate(pole, system, solution));
}

/** Four goals, as a slice has: three harmonics over the winding and the pull. */
function estimate(pole: PoleSection, system: System, { field, factor: factored }: SolvedField): void {
  if (factored === undefined) throw new Error('no factor');
  const harmonics = [1, 3, 5].map((n) =>
    weightedIntegral(field.mesh, ['winding'], (x) => Math.sin((n * Math.PI * x) / pole.polePitch)),
  );
  const pull = stressFunctional(field, ['winding'], () => [0, 1 / (pole.windingTo - pole.windingFrom)]);
  estimateGoalErrors(system, field, factored, [...harmonics, pull]);
}

/** For each triangle of one mesh, the longest edge of the triangle of the other that lies at its middle. */
function sizesOf(mesh: Mesh, other: Mesh): Float64Array {
  const locator = buildLocator(other);
  return Float64Array.from({ length: triangleCount(mesh) }, (_, t) => {
    let [x, y] = [0, 0];
    for (let k = 0; k < 3; k++) {
      x += mesh.xy[2 * mesh.triangles[3 * t + k]] / 3;
      y += mesh.xy[2 * mesh.triangles[3 * t + k] + 1] / 3;
    }
    const spot = locator.find(x, y);
    return spot === undefined ? Infinity : 1.1 * longestEdge(other, spot.triangle);
  });
}

function longestEdge({ xy, triangles }: Mesh, t: number): number {
  let longest = 0;
  for (let k = 0; k < 3; k++) {
    const [a, b] = [2 * triangles[3 * t + k], 2 * triangles[3 * t + ((k + 1) % 3)]];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  }
  return longest;
}
