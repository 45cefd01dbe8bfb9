/**
 * What the speed of the built packages is, on this machine, now: `npm run bench`.
 *
 * Times are medians after warming up, except where the first time is what is asked for; work that is not meant to be timed
 * stays out of the timed part, and each part prints a figure by which a wrong answer would show. Ratios are to a baseline
 * timed in the same run: on a shared machine they alone compare from day to day. Left out: pictures and reports by
 * themselves (in `solve --out`), reading of machine files (about a millisecond).
 *
 *     npm run bench                                  ours alone
 *     npm run bench -- --peers                       beside native libraries, built by benchmarks/peers/build.sh
 *     npm run bench -- --peers --only sparse         one group of it: sparse, field, mesher, cold
 *     npm run bench -- --growth                      time and memory up to 1,000,000 unknowns, and what fits 4 GiB
 *     --runs N (7)   --max-unknowns N                fewer samples; smaller systems only
 */
import '@gapwright/cli/fused-products';
import { readFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { readMachine } from '@gapwright/machine-models';
import { benchAssembly } from './assembly.js';
import { benchCommand } from './command.js';
import { compare } from './compare.js';
import { printGrowth } from './growth.js';
import { benchMesher } from './mesher.js';
import { benchOrdering } from './ordering.js';
import { benchSlices } from './slices.js';
import { benchSparse } from './sparse.js';

const { values: asked } = parseArgs({
  options: {
    peers: { type: 'boolean', default: false },
    growth: { type: 'boolean', default: false },
    only: { type: 'string' },
    runs: { type: 'string', default: '7' },
    'max-unknowns': { type: 'string', default: 'Infinity' },
  },
});
const maxUnknowns = Number(asked['max-unknowns']);

console.log(`Node ${process.version}, ${cpus().length} x ${cpus()[0]?.model ?? 'unknown processor'}`);
if (asked.peers) await compare({ runs: Number(asked.runs), maxUnknowns, only: asked.only });
if (asked.growth) await printGrowth(maxUnknowns);
if (!asked.peers && !asked.growth) await benchOurs();

async function benchOurs(): Promise<void> {
  const scenario = fileURLToPath(new URL('../../packages/cli/scenarios/hut-hydro.yaml', import.meta.url));
  const { machine } = readMachine(readFileSync(scenario, 'utf8'), { file: 'hut-hydro.yaml' });
  benchSlices(machine); // first, so that its first time is cold
  benchCommand(scenario);
  await benchOrdering();
  benchSparse();
  benchAssembly();
  benchMesher();
}
