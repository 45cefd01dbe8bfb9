import { join } from 'node:path';
import type { Comparison } from './comparison.js';
import { fieldPeer, targetAt } from './comparison.js';
import { assemblyOf, LAW_DEGREE, solveField } from './ours.js';
import type { Peer } from './peer.js';
import { timerOfPeer, withPeers } from './peer.js';
import { gappedCore, steelBlock, writeField } from './systems.js';
import { interleave, timerOf } from './timing.js';

const SIZES = [20_000, 50_000];
/** Wanted ratio of the residual to that at A = 0, on both sides. */
const TOLERANCE = 1e-8;
/** Height of the potential's bump for assembly, Wb/m: about 1.7 T at the steepest. */
const HEIGHT = 0.54;
const ORDERINGS = ['scotch', 'metis', 'pord', 'amd'];

export async function compareField(comparison: Comparison): Promise<void> {
  const peer = fieldPeer();
  await withPeers([peer], async () => {
    for (const wished of SIZES.filter((size) => size <= comparison.maxUnknowns)) {
      await compareAssembly(comparison, peer, wished);
      await compareNewton(comparison, peer, wished);
    }
  });
}

async function compareAssembly({ runs, folder, add }: Comparison, peer: Peer, wished: number): Promise<void> {
  const problem = steelBlock(wished);
  const file = join(folder, 'field.bin');
  writeField(file, problem);
  const { unknowns } = await peer.ask('load', file, LAW_DEGREE);
  const ours = assemblyOf(problem, HEIGHT);
  const theirs = timerOfPeer(peer, 'assemble', HEIGHT);
  const [oursMs, theirsMs] = await interleave(runs, [timerOf(ours.run), theirs.timer]);
  const check = ours.check();
  const { residual, quadratic } = theirs.last();
  add({
    part: 'Jacobian and residual',
    peer: 'DOLFIN',
    size: `${unknowns}`,
    ours: oursMs,
    theirs: theirsMs,
    must: 0.25,
    aim: 0.12,
    check:
      `${((1000 * oursMs) / (problem.mesh.triangles.length / 3)).toFixed(2)} us a triangle, all of steel; ` +
      `differ by ${apart(check.residual, residual)} in |r|, ${apart(check.quadratic, quadratic)} in u.K.u`,
  });
}

async function compareNewton({ runs, folder, add }: Comparison, peer: Peer, wished: number): Promise<void> {
  const problem = gappedCore(wished);
  const file = join(folder, 'field.bin');
  writeField(file, problem);
  await peer.ask('load', file, LAW_DEGREE);
  const ordering = await fastestOrdering(peer);
  let last = solveField(problem, TOLERANCE);
  const theirs = timerOfPeer(peer, 'newton', ordering, TOLERANCE);
  const [oursMs, theirsMs] = await interleave(runs, [
    timerOf(() => {
      last = solveField(problem, TOLERANCE);
    }),
    theirs.timer,
  ]);
  const { steps, shortened, energy } = theirs.last();
  const shorter = last.report.stepLengths.filter((length) => length < 1).length;
  add({
    part: 'whole nonlinear solve',
    peer: `DOLFIN, MUMPS ${ordering}`,
    size: `${problem.count}`,
    ours: oursMs,
    theirs: theirsMs,
    ...targetAt(wished, [
      [20_000, 0.35, 0.2],
      [50_000, 0.45, 0.25],
    ]),
    check:
      `steps ${last.report.steps}, ${steps} (shortened ${shorter}, ${shortened}); ` +
      `energies ${last.energy().toFixed(3)} J/m, differ by ${apart(last.energy(), energy)}`,
  });
}

async function fastestOrdering(peer: Peer): Promise<string> {
  let best = { ordering: '', ms: Infinity };
  for (const ordering of ORDERINGS) {
    await peer.ask('newton', 1, ordering, TOLERANCE);
    const ms = Number((await peer.ask('newton', 1, ordering, TOLERANCE)).ms);
    if (ms < best.ms) best = { ordering, ms };
  }
  return best.ordering;
}

const apart = (mine: number, theirs: string): string => Math.abs(mine / Number(theirs) - 1).toExponential(0);
