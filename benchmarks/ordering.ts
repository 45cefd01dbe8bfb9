import { placementOf } from '@gapwright/fem-core/equations';
import type { GradientReport, Placement, SymmetricPattern } from '@gapwright/fem-core/sparse';
import {
  analyse,
  buildCoarseLevel,
  dissectionOrder,
  minimumDegreeOrder,
  solveByConjugateGradients,
} from '@gapwright/fem-core/sparse';
import { laplacian } from './systems.js';
import { interleave, ms, printTable, timed, timerOf } from './timing.js';

const SIZES = [5_000, 20_000, 50_000, 200_000];

/** Both orders, their fill and work, and conjugate gradients with two levels: how the steps grow. */
export async function benchOrdering(): Promise<void> {
  console.log('\norders of quadratic elements, and conjugate gradients to 1e-10 (times in ms, medians)');
  const rows = [
    [
      'unknowns',
      'min. degree',
      'dissection',
      'ratio',
      'fill, degree',
      'dissection',
      'work ratio',
      'CG',
      'steps',
      'residual',
    ],
  ];
  for (const size of SIZES) {
    const { mesh, unknowns, pattern, values, right } = laplacian(size);
    const placement = placementOf(mesh, unknowns);
    const degree = analyse(pattern, minimumDegreeOrder(pattern));
    const dissected = analyse(pattern, dissectionOrder(pattern, placement));
    const [degreeMs, dissectionMs] = await orderTimes(pattern, placement);
    const x = new Float64Array(pattern.n);
    const gradients = timed((): GradientReport => {
      const level = buildCoarseLevel(pattern, placement);
      return solveByConjugateGradients(pattern, values, right, x, { level });
    });
    const fill = (entries: number): string => (entries / pattern.row.length).toFixed(2);
    rows.push([
      `${pattern.n}`,
      ms(degreeMs),
      ms(dissectionMs),
      (dissectionMs / degreeMs).toFixed(2),
      fill(degree.factorEntries),
      fill(dissected.factorEntries),
      (dissected.flops / degree.flops).toFixed(2),
      ms(gradients.ms),
      `${gradients.result.steps}`,
      gradients.result.residual.toExponential(1),
    ]);
  }
  printTable(rows);
  console.log('  fill: entries of the factor over those of the matrix; work: dissection over minimum degree');
}

const orderTimes = (pattern: SymmetricPattern, placement: Placement): Promise<number[]> =>
  interleave(9, [timerOf(() => minimumDegreeOrder(pattern)), timerOf(() => dissectionOrder(pattern, placement))]);
