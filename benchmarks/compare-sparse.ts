import { join } from 'node:path';
import { unfusedKernels } from '@gapwright/fem-core/sparse';
import type { Comparison, Row } from './comparison.js';
import { builtPath, builtPeer, ownProcess, targetAt } from './comparison.js';
import {
  analyseOrdered,
  orderByDegree,
  orderByDissection,
  residualOf,
  solverOf,
  solveTimes,
  usualOrder,
} from './ours.js';
import type { Answer, Peer } from './peer.js';
import { startPeer, timerOfPeer, withPeers } from './peer.js';
import type { LinearProblem } from './systems.js';
import { laplacian, writeLinear, writeOrder } from './systems.js';
import { interleave, median, timerOf } from './timing.js';

const SIZES = [5_000, 20_000, 50_000, 200_000];
const SETTINGS = [
  ['supernodal', 'amd'],
  ['supernodal', 'metis'],
  ['supernodal', 'nesdis'],
  ['simplicial', 'amd'],
  ['simplicial', 'metis'],
] as const;
type Setting = (typeof SETTINGS)[number];

interface Peers {
  readonly cholmod: Peer;
  readonly mumps: Peer;
  /** Ours without WebAssembly. */
  readonly plain: Peer;
}

/** One system on all sides. */
interface Case extends Peers {
  readonly problem: LinearProblem;
  readonly file: string;
  readonly runs: number;
  readonly row: (row: Omit<Row, 'size'>) => void;
}

export async function compareSparse(comparison: Comparison): Promise<void> {
  const cholmod = builtPeer('cholmod');
  const mumps = builtPeer('mumps');
  if (cholmod === undefined || mumps === undefined) return;
  const plain = ownProcess('--plain');
  const peers = [cholmod, mumps, plain];
  await withPeers(peers, async () => {
    console.log(`  CHOLMOD: ${pairs(await cholmod.ask('info'))}`);
    for (const wished of SIZES.filter((size) => size <= comparison.maxUnknowns)) {
      const problem = laplacian(wished);
      const size = `${problem.pattern.n}`;
      const file = join(comparison.folder, 'linear.bin');
      writeLinear(file, problem);
      for (const peer of [cholmod, mumps]) await peer.ask('load', file);
      writeOrder(`${file}.usual`, usualOrder(problem));
      await plain.ask('load', file, `${file}.usual`); // without the mesh it could not find that order itself
      const row = (columns: Omit<Row, 'size'>): void => comparison.add({ ...columns, size });
      await compareCase({ problem, file, runs: comparison.runs, row, cholmod, mumps, plain });
    }
  });
}

async function compareCase(at: Case): Promise<void> {
  await orderings(at);
  const best = await bestSettings(at.cholmod);
  await factors(at, best.factor);
  await solves(at, best.solve);
  await wholes(at, best.factor);
}

/** Ordering, fill, symbolic analysis. */
async function orderings({ problem, file, runs, row, cholmod }: Case): Promise<void> {
  const { n } = problem.pattern;
  const fillOf = async (order: Int32Array): Promise<number> => {
    writeOrder(`${file}.order`, order);
    return Number((await cholmod.ask('fill', 'given', `${file}.order`)).fill);
  };
  const amd = timerOfPeer(cholmod, 'order');
  const byDegree = orderByDegree(problem);
  const fills = {
    degree: await fillOf(byDegree),
    amd: Number((await cholmod.ask('fill', 'amd')).fill),
    metis: Number((await cholmod.ask('fill', 'metis')).fill),
  };
  const [degreeMs, amdMs] = await interleave(runs, [timerOf(() => orderByDegree(problem)), amd.timer]);
  row({
    part: 'minimum-degree ordering',
    peer: 'CHOLMOD AMD',
    ours: degreeMs,
    theirs: amdMs,
    must: 1.2,
    aim: 0.9,
    check: `fill ${(fills.degree / fills.amd).toFixed(3)} x AMD's`,
  });

  const dissection = orderByDissection(problem);
  if (n >= 18_000) {
    const columns = { part: 'nested dissection', peer: 'CHOLMOD AMD', ...targetAt(n, [[20_000, 1.8, 0.8]]) };
    const [oursMs, theirs] = await interleave(runs, [timerOf(() => orderByDissection(problem)), amd.timer]);
    const check = `fill ${((await fillOf(dissection)) / fills.amd).toFixed(3)} x AMD's`;
    row({ ...columns, ours: oursMs, theirs, check });
  }
  if (n >= 45_000) {
    row({
      part: 'fill of the dissection',
      peer: 'METIS',
      ours: await fillOf(dissection),
      theirs: fills.metis,
      count: true,
      must: 1.4,
      aim: 1.03,
      check: `by minimum degree ${(fills.degree / fills.metis).toFixed(3)} x METIS's`,
    });
  }

  const symbolic = timerOfPeer(cholmod, 'symbolic');
  const [analysisMs, symbolicMs] = await interleave(runs, [
    timerOf(() => analyseOrdered(problem, byDegree)),
    symbolic.timer,
  ]);
  const { blockSize, factorEntries } = analyseOrdered(problem, byDegree);
  row({
    part: 'symbolic analysis',
    peer: 'CHOLMOD supernodal',
    ours: analysisMs,
    theirs: symbolicMs,
    must: 1.6,
    aim: 1.0,
    check: `entries ${(factorEntries / fills.degree).toFixed(6)} x counted by CHOLMOD, with zeros ${(blockSize / factorEntries).toFixed(2)}`,
  });
}

/** The settings of CHOLMOD that are fastest at the factor and at the solve, by the shortest of several runs each. */
async function bestSettings(cholmod: Peer): Promise<{ factor: Setting; solve: Setting }> {
  const tried: { setting: Setting; factor: number; solve: number }[] = [];
  for (const setting of SETTINGS) {
    await cholmod.ask('setting', ...setting);
    const factor = await shortest(() => cholmod.ask('factor', 1));
    const solve = await shortest(() => cholmod.ask('solve', 1));
    tried.push({ setting, factor, solve });
  }
  const least = (key: 'factor' | 'solve'): Setting => tried.reduce((a, b) => (b[key] < a[key] ? b : a)).setting;
  return { factor: least('factor'), solve: least('solve') };
}

/** Of three runs after one that warms up, and more while they are short. */
async function shortest(ask: () => Promise<Answer>): Promise<number> {
  await ask();
  let least = Infinity;
  for (let count = 0, spent = 0; count < 3 || (spent < 200 && count < 30); count++) {
    const ms = Number((await ask()).ms);
    spent += ms;
    least = Math.min(least, ms);
  }
  return least;
}

async function factors({ problem, runs, row, cholmod, mumps, plain }: Case, setting: Setting): Promise<void> {
  const { n } = problem.pattern;
  await cholmod.ask('setting', ...setting);
  await mumps.ask('setting', 'scotch');
  const analysis = analyseOrdered(problem, usualOrder(problem));
  const solver = solverOf(problem, analysis);
  const unfused = solverOf(problem, analysis, unfusedKernels());
  const theirs = timerOfPeer(cholmod, 'factor');
  const native = timerOfPeer(mumps, 'factor');
  const without = timerOfPeer(plain, 'factor');
  const [oursMs, unfusedMs, cholmodMs, mumpsMs, plainMs] = await interleave(runs, [
    timerOf(solver.factor),
    timerOf(unfused.factor),
    theirs.timer,
    native.timer,
    without.timer,
  ]);
  solver.solve();
  const peer = `CHOLMOD ${setting.join(' ')}`;
  row({
    part: 'numeric factor',
    peer,
    ours: oursMs,
    theirs: cholmodMs,
    ...targetAt(n, [
      [5_000, 0.2, 0.1],
      [200_000, 0.35, 0.13],
    ]),
    check: `residual ${residual(residualOf(problem, solver.x))}, ${gigaflops(analysis.flops, oursMs)} Gflop/s; theirs ${gigaflops(Number(theirs.last().flops), cholmodMs)}`,
  });
  row({
    part: 'numeric factor, unfused products',
    peer,
    ours: unfusedMs,
    theirs: cholmodMs,
    check: `${gigaflops(analysis.flops, unfusedMs)} Gflop/s: what hosts without relaxed SIMD get`,
  });
  row({
    part: 'numeric factor, best native',
    peer: 'MUMPS SCOTCH',
    ours: oursMs,
    theirs: mumpsMs,
    ...(n < 100_000 ? targetAt(n, [[20_000, 0.6, 0.3]]) : {}),
    check: 'as above',
  });
  row({
    part: 'numeric factor, no WebAssembly',
    peer,
    ours: plainMs,
    theirs: cholmodMs,
    ...targetAt(n, [
      [5_000, 0.9, 0.55],
      [200_000, 1.8, 0.55],
    ]),
    check: `residual ${residual(Number(without.last().residual))}`,
  });
}

async function solves({ problem, runs, row, cholmod }: Case, setting: Setting): Promise<void> {
  await cholmod.ask('setting', ...setting);
  const solver = solverOf(problem, analyseOrdered(problem, usualOrder(problem)));
  const theirs = timerOfPeer(cholmod, 'solve');
  const [oursMs, theirsMs] = await interleave(runs, [timerOf(solver.solve), theirs.timer]);
  row({
    part: 'one solve',
    peer: `CHOLMOD ${setting.join(' ')}`,
    ours: oursMs,
    theirs: theirsMs,
    ...targetAt(problem.pattern.n, [
      [5_000, 1.8, 1.2],
      [50_000, 1.5, 0.9],
    ]),
    check: residuals(residualOf(problem, solver.x), theirs.last()),
  });
}

/** From the matrix to the solution, once, and ten times with one analysis. */
async function wholes({ problem, runs, row, cholmod, mumps }: Case, setting: Setting): Promise<void> {
  const { n } = problem.pattern;
  await cholmod.ask('setting', 'supernodal', 'amd');
  let x: Float64Array = new Float64Array(n);
  const once = timerOfPeer(cholmod, 'once');
  const [onceMs, theirOnceMs] = await interleave(runs, [
    timerOf(() => {
      x = solveTimes(problem, 1, usualOrder(problem));
    }),
    once.timer,
  ]);
  row({
    part: 'analysis, factor and solve, once',
    peer: 'CHOLMOD AMD',
    ours: onceMs,
    theirs: theirOnceMs,
    ...targetAt(n, [[20_000, 0.55, 0.35]]),
    check: residuals(residualOf(problem, x), once.last()),
  });

  await cholmod.ask('setting', ...setting);
  const few = Math.max(1, Math.ceil(runs / 2)); // ten factors are enough of a sample
  const natives = [timerOfPeer(cholmod, 'ten'), timerOfPeer(mumps, 'ten')];
  const [tenMs, ...theirTens] = await interleave(few, [
    timerOf(() => {
      x = solveTimes(problem, 10, usualOrder(problem));
    }),
    ...natives.map(({ timer }) => timer),
  ]);
  const fastest = theirTens[0] < theirTens[1] ? 0 : 1;
  row({
    part: 'one analysis, ten factors and solves',
    peer: fastest === 0 ? `CHOLMOD ${setting.join(' ')}` : 'MUMPS SCOTCH',
    ours: tenMs,
    theirs: theirTens[fastest],
    must: 0.5,
    aim: 0.28,
    check: residuals(residualOf(problem, x), natives[fastest].last()),
  });
}

const COLD_SIZES = [5_000, 50_000];

/** The first solve of a fresh process: within the process once the matrix is read, and with the process's start and end. */
export async function compareCold(comparison: Comparison): Promise<void> {
  const path = builtPath('cholmod');
  if (path === undefined) return;
  for (const wished of COLD_SIZES.filter((size) => size <= comparison.maxUnknowns)) {
    const problem = laplacian(wished);
    const file = join(comparison.folder, 'linear.bin');
    writeLinear(file, problem);
    const sides = [() => ownProcess(), () => startPeer(path)];
    const inside: number[][] = [[], []];
    const whole: number[][] = [[], []];
    const answers: Answer[] = [{}, {}];
    for (let run = 0; run < comparison.runs; run++) {
      for (const [k, start] of sides.entries()) {
        const begun = performance.now();
        const peer = start();
        await withPeers([peer], async () => {
          await peer.ask('load', file);
          answers[k] = await peer.ask('once', 1);
        });
        whole[k].push(performance.now() - begun);
        inside[k].push(Number(answers[k].ms));
      }
    }
    const common = { peer: 'CHOLMOD', size: `${problem.pattern.n}` };
    const check = residuals(Number(answers[0].residual), answers[1]);
    comparison.add({
      part: 'cold first solve, process running',
      ...common,
      ours: median(inside[0]),
      theirs: median(inside[1]),
      ...targetAt(wished, [
        [5_000, 2, 1],
        [50_000, 0.9, 0.5],
      ]),
      check,
    });
    comparison.add({
      part: 'the same from process start to end',
      ...common,
      ours: median(whole[0]),
      theirs: median(whole[1]),
      check,
    });
  }
}

const pairs = (answer: Answer): string =>
  Object.entries(answer)
    .map((pair) => pair.join(' '))
    .join(', ');
const residual = (value: number): string => value.toExponential(0);
const residuals = (mine: number, theirs: Answer): string =>
  `residuals ${residual(mine)}, ${residual(Number(theirs.residual))}`;
const gigaflops = (flops: number, timeMs: number): string => (flops / timeMs / 1e6).toFixed(1);
