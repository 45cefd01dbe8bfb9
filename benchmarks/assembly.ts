import { buildSystem, numberUnknowns } from '@gapwright/fem-core/equations';
import { triangleCount } from '@gapwright/fem-core/mesh';
import { assemblyOf } from './ours.js';
import { steelBlock } from './systems.js';
import { medianMs, ms, printTable, timed } from './timing.js';

/** Residual and tangent of quadratic elements of steel, and what comes before them, by size. */
export function benchAssembly(): void {
  console.log('\nassembly: quadratic elements of steel (times in ms, medians; microseconds a triangle)');
  const rows = [
    [
      'unknowns',
      'triangles',
      'number',
      'build',
      'first',
      'assemble',
      'us/triangle',
      'build/assemble',
      'residual',
      'u K u',
    ],
  ];
  for (const [wished, runs] of [
    [5_000, 31],
    [50_000, 15],
    [200_000, 7],
  ] as const) {
    const problem = steelBlock(wished);
    const { mesh, setup, count } = problem;
    const number = medianMs(runs, () => numberUnknowns(mesh, setup));
    const unknowns = numberUnknowns(mesh, setup);
    const build = medianMs(runs, () => buildSystem(mesh, setup, unknowns));
    const assembly = assemblyOf(problem, 0.4);
    const first = timed(assembly.run).ms;
    const warm = medianMs(runs, assembly.run, 10);
    const { residual, quadratic } = assembly.check();
    rows.push([
      `${count}`,
      `${triangleCount(mesh)}`,
      ms(number),
      ms(build),
      ms(first),
      ms(warm),
      ((1000 * warm) / triangleCount(mesh)).toFixed(3),
      (build / warm).toFixed(2),
      residual.toExponential(9),
      quadratic.toExponential(9),
    ]);
  }
  printTable(rows);
}
