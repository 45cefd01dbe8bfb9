/**
 * Ours as a process of its own, in the manner of the peers (peers/peer.hpp): for first calls in a fresh process, for running
 * without WebAssembly (`--plain` takes it away before the library is loaded), and for peak memory.
 */
import '@gapwright/cli/fused-products';
import { readFileSync } from 'node:fs';
import { createInterface } from 'node:readline';
import type { LinearSystem, Solver } from './ours.js';
import { timed, timerOf } from './timing.js';

if (process.argv.includes('--plain')) Reflect.deleteProperty(globalThis, 'WebAssembly');
const ours = await import('./ours.js');
const { gappedCore, laplacian, LIMITS, readLinear, readOrder } = await import('./systems.js');
const { meshSection } = await import('@gapwright/fem-core/mesh');

let system: LinearSystem | undefined;
let order: Int32Array | undefined;
let solver: Solver | undefined;

/** Figures of the answer by name. */
type Figures = Readonly<Record<string, number>>;

const verbs: Readonly<Record<string, (words: readonly string[]) => Figures | Promise<Figures>>> = {
  /** A matrix, and the order to factor it in where that is not to be minimum degree. */
  load: ([file, orderFile]) => {
    system = readLinear(readFileSync(file));
    order = orderFile === undefined ? undefined : readOrder(readFileSync(orderFile));
    solver = undefined;
    return { n: system.pattern.n };
  },
  /** Ordering, analysis, factor and solution; the first call of a process is the cold one. */
  once: async ([times]) => {
    const loaded = need(system);
    let x: Float64Array = new Float64Array();
    const ms = await timerOf(() => {
      x = ours.solveTimes(loaded, 1);
    })(Number(times));
    return { ms, residual: ours.residualOf(loaded, x) };
  },
  factor: async ([times]) => {
    const loaded = need(system);
    solver ??= ours.solverOf(loaded, ours.analyseOrdered(loaded, order));
    const ms = await timerOf(solver.factor)(Number(times));
    solver.solve();
    return { ms, residual: ours.residualOf(loaded, solver.x) };
  },
  /** `grow linear|nonlinear UNKNOWNS`: mesh and whole solve in milliseconds, and the most memory held, MiB. */
  grow: ([kind, wished]) => (kind === 'linear' ? growLinear(Number(wished)) : growField(Number(wished))),
};

function need<T>(value: T | undefined): T {
  if (value === undefined) throw new Error('nothing is loaded');
  return value;
}

/** Small problems are solved until the code is warm, large ones once: their first time differs little from later ones. */
function settled<T>(work: () => T): { ms: number; result: T } {
  let last = timed(work);
  for (let spent = last.ms; spent < 1500; spent += last.ms) last = timed(work);
  return last;
}

const peakMiB = (): number => process.resourceUsage().maxRSS / 1024;

function growLinear(wished: number): Figures {
  const before = peakMiB();
  const problem = laplacian(wished);
  const meshed = settled(() => meshSection(problem.section, LIMITS));
  const solved = settled(() => ours.solveTimes(problem, 1, ours.usualOrder(problem)));
  const check = ours.residualOf(problem, solved.result);
  return { n: problem.pattern.n, meshMs: meshed.ms, ms: solved.ms, before, peak: peakMiB(), check };
}

function growField(wished: number): Figures {
  const before = peakMiB();
  const problem = gappedCore(wished);
  const meshed = settled(() => meshSection(problem.section, LIMITS));
  const solved = settled(() => ours.solveField(problem, 1e-8));
  return {
    n: problem.count,
    meshMs: meshed.ms,
    ms: solved.ms,
    before,
    peak: peakMiB(),
    check: solved.result.report.steps,
  };
}

for await (const line of createInterface({ input: process.stdin })) {
  const [verb, ...words] = line.split(' ');
  try {
    const figures = await verbs[verb](words);
    console.log(
      Object.entries(figures)
        .map((pair) => pair.join('='))
        .join(' '),
    );
  } catch (error) {
    console.log(`error ${String(error).replace(/\s+/g, ' ')}`);
  }
}
