/** How time and memory grow with the number of unknowns, from the mesh to the solution, each size in a process of its own. */
import { ownProcess } from './comparison.js';
import { ms, printTable } from './timing.js';

const SIZES = [1_000, 3_000, 10_000, 30_000, 100_000, 300_000, 1_000_000];
const KINDS = ['linear', 'nonlinear'] as const;
const SOLVE = {
  linear: 'ordering, analysis, factor and solution',
  nonlinear: "unknowns, pattern, ordering, analysis and Newton's method from zero",
} as const;
const LIMIT_MIB = 4096;
/** Step of the search for the largest system, as a factor. */
const STEP = 1.15;

interface Grown {
  readonly n: number;
  readonly meshMs: number;
  readonly ms: number;
  /** Of the process, and of it before there was a mesh, MiB. */
  readonly peak: number;
  readonly before: number;
  /** Residual, or Newton steps. */
  readonly check: number;
}

export async function printGrowth(maxUnknowns: number): Promise<void> {
  for (const kind of KINDS) {
    console.log(`\ngrowth, ${kind}, a process each; solve: ${SOLVE[kind]}`);
    const grown: Grown[] = [];
    for (const size of SIZES.filter((wished) => wished <= maxUnknowns)) grown.push(await grow(kind, size));
    printTable([
      ['unknowns', 'mesh, ms', 'solve, ms', 'peak memory, MiB', kind === 'linear' ? 'residual' : 'Newton steps'],
      ...grown.map((g) => [
        `${g.n}`,
        ms(g.meshMs),
        ms(g.ms),
        g.peak.toFixed(0),
        kind === 'linear' ? g.check.toExponential(0) : `${g.check}`,
      ]),
    ]);
    const slope = (of: (g: Grown) => number): string => slopeOf(grown.map((g) => [g.n, of(g)])).toFixed(2);
    console.log(
      `  time ~ n^${slope((g) => g.ms)}, meshing ~ n^${slope((g) => g.meshMs)}, memory above the empty process ` +
        `(${grown[0].before.toFixed(0)} MiB) ~ n^${slope((g) => g.peak - g.before)}`,
    );
    await printLargest(kind, grown, maxUnknowns);
  }
}

async function grow(kind: string, wished: number): Promise<Grown> {
  const own = ownProcess();
  try {
    const answer = await own.ask('grow', kind, wished);
    const figure = (name: string): number => Number(answer[name]);
    return {
      n: figure('n'),
      meshMs: figure('meshMs'),
      ms: figure('ms'),
      peak: figure('peak'),
      before: figure('before'),
      check: figure('check'),
    };
  } finally {
    await own.end();
  }
}

/** Least squares of log y = a + slope log x. */
function slopeOf(points: readonly (readonly [x: number, y: number])[]): number {
  const logs = points.map(([x, y]) => [Math.log(x), Math.log(y)]);
  const mean = (k: number): number => logs.reduce((sum, point) => sum + point[k], 0) / logs.length;
  const [mx, my] = [mean(0), mean(1)];
  const above = logs.reduce((sum, [x, y]) => sum + (x - mx) * (y - my), 0);
  return above / logs.reduce((sum, [x]) => sum + (x - mx) ** 2, 0);
}

/** The largest system whose process stays within 4 GiB: from where memory per unknown points, in steps, to the turn. */
async function printLargest(kind: string, grown: readonly Grown[], maxUnknowns: number): Promise<void> {
  const last = grown[grown.length - 1];
  const pointed = (last.n * (LIMIT_MIB - last.before)) / (last.peak - last.before);
  if (pointed > STEP * maxUnknowns) {
    console.log(`  within 4 GiB: ${last.n} unknowns (${last.peak.toFixed(0)} MiB); larger ones were not asked for`);
    return;
  }
  let wished = Math.round(pointed);
  let held: Grown | undefined;
  for (let direction = 0; ; ) {
    const tried = await grow(kind, wished).catch(() => undefined);
    const fits = tried !== undefined && tried.peak <= LIMIT_MIB;
    if (fits) held = tried;
    if (direction !== 0 && fits !== direction > 0) break;
    direction = fits ? 1 : -1;
    wished = Math.round(wished * (fits ? STEP : 1 / STEP));
    if (wished > maxUnknowns || wished < 1000) break;
  }
  console.log(
    held === undefined
      ? '  within 4 GiB: none found'
      : `  within 4 GiB: ${held.n} unknowns, ${held.peak.toFixed(0)} MiB, in steps of ${STEP}`,
  );
}
