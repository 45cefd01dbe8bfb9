import type { Factor } from '@gapwright/fem-core/sparse';
import { analyse, factor, multiply, solve, solveMany } from '@gapwright/fem-core/sparse';
import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import type { LinearSystem } from './ours.js';
import { residualOf, usualOrder } from './ours.js';
import type { LinearProblem } from './systems.js';
import { laplacian } from './systems.js';
import { medianMs, ms, printTable } from './timing.js';

const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i], 0);

/** Conjugate gradients with the diagonal as preconditioner, to 1e-10 of the right-hand side: the plain way to do it. */
function solveByGradients({ pattern, values, right }: LinearSystem): { x: Float64Array; steps: number } {
  const { n, start } = pattern;
  const inverse = Float64Array.from({ length: n }, (_, i) => 1 / values[start[i]]);
  const x = new Float64Array(n);
  const r = right.slice();
  const z = r.map((value, i) => value * inverse[i]);
  const p = z.slice();
  const q = new Float64Array(n);
  let rz = dot(r, z);
  const goal = 1e-20 * dot(r, r);
  for (let steps = 1; steps < 10 * n; steps++) {
    multiply(pattern, values, p, q);
    const length = rz / dot(p, q);
    for (let i = 0; i < n; i++) {
      x[i] += length * p[i];
      r[i] -= length * q[i];
    }
    if (dot(r, r) <= goal) return { x, steps };
    for (let i = 0; i < n; i++) z[i] = r[i] * inverse[i];
    const next = dot(r, z);
    for (let i = 0; i < n; i++) p[i] = z[i] + (next / rz) * p[i];
    rz = next;
  }
  throw new Error('conjugate gradients did not converge');
}

function positive(result: ReturnType<typeof factor>): Factor {
  if (!('blocks' in result)) throw new Error(`not positive definite at ${result.unknown}`);
  return result;
}

/** Order, analysis, factor and solve against conjugate gradients in the same run. */
export function benchSparse(): void {
  console.log('\nsparse solver: Laplacian of quadratic elements on the unit square (times in ms, medians)');
  const heads = ['unknowns', 'entries', 'order', 'analysis', 'factor', 'Gflop/s', 'plain', 'solve', 'four', 'fill'];
  const rows: string[][] = [[...heads, 'residual', 'CG', 'steps', 'all/CG']];
  for (const [wished, runs] of [
    [5_000, 15],
    [20_000, 9],
    [50_000, 5],
  ] as const) {
    rows.push(benchProblem(laplacian(wished), runs));
  }
  printTable(rows);
  console.log(
    '  plain: the factor without WebAssembly; four: right-hand sides at once; fill: entries of the factor over those',
  );
  console.log('  of the matrix; all/CG: order + analysis + factor + solve');
  benchDense();
}

/** A row of the table. */
function benchProblem(problem: LinearProblem, runs: number): string[] {
  const { pattern, values, right } = problem;
  const { n } = pattern;
  const order = usualOrder(problem);
  const analysis = analyse(pattern, order);
  const orderMs = medianMs(runs, () => usualOrder(problem), 1);
  const analysisMs = medianMs(runs, () => analyse(pattern, order), 1);
  let factored = positive(factor(analysis, values, { plain: true }));
  const again = (plain: boolean): void => {
    factored = positive(factor(analysis, values, { reuse: factored, plain }));
  };
  const plainMs = medianMs(runs, () => again(true), 1);
  const factorMs = medianMs(runs, () => again(false), 2);
  const x = new Float64Array(n);
  const solveMs = medianMs(3 * runs, () => solve(factored, right, x), 1);
  const four = new Float64Array(4 * n);
  const fourMs = medianMs(runs, () => solveMany(factored, four, four, 4), 1);
  const gradients = solveByGradients(problem);
  const gradientsMs = medianMs(Math.min(runs, 3), () => solveByGradients(problem), 0);
  return [
    `${n}`,
    `${pattern.row.length}`,
    ms(orderMs),
    ms(analysisMs),
    ms(factorMs),
    (analysis.flops / factorMs / 1e6).toFixed(1),
    ms(plainMs),
    ms(solveMs),
    ms(fourMs),
    (analysis.factorEntries / pattern.row.length).toFixed(1),
    residualOf(problem, x).toExponential(1),
    ms(gradientsMs),
    `${gradients.steps}`,
    ((orderMs + analysisMs + factorMs + solveMs) / gradientsMs).toFixed(2),
  ];
}

/** A system small enough for a dense general-purpose library. */
function benchDense(): void {
  const problem = laplacian(300);
  const { pattern, values, right } = problem;
  const { n, start, row } = pattern;
  const dense = Matrix.zeros(n, n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      dense.set(row[p], j, values[p]);
      dense.set(j, row[p], values[p]);
    }
  }
  const column = Matrix.columnVector(Array.from(right));
  const ours = (): Float64Array => solve(positive(factor(analyse(pattern), values)), right, new Float64Array(n));
  const theirs = (): Matrix => new CholeskyDecomposition(dense).solve(column);
  const [oursMs, theirsMs] = [medianMs(15, ours, 5), medianMs(15, theirs, 5)];
  const residual = residualOf(problem, ours()).toExponential(1);
  const peer = residualOf(problem, Float64Array.from(theirs().to1DArray())).toExponential(1);
  console.log(
    `  ${n} unknowns, order to solution: ${(oursMs / theirsMs).toFixed(3)} x dense Cholesky of ml-matrix ` +
      `(${ms(oursMs)} / ${ms(theirsMs)} ms, residuals ${residual} / ${peer})`,
  );
}
