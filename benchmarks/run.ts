/**
 * What the speed of the built packages is, on this machine, now: `npm run bench`.
 *
 * Times are medians after warming up, except where the first time is what is asked for; work that is not meant to be timed
 * stays out of the timed part, and each part prints a figure by which a wrong answer would show. Ratios are to a baseline
 * timed in the same run: on a shared machine they alone compare from day to day. Left out: pictures and reports by
 * themselves (in `solve --out`), reading of machine files (about a millisecond), memory.
 */
import { readFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import { readMachine } from '@gapwright/machine-models';
import { benchCommand } from './command.js';
import { benchMesher } from './mesher.js';
import { benchSlices } from './slices.js';
import { benchSparse } from './sparse.js';

const scenario = fileURLToPath(new URL('../../packages/cli/scenarios/hut-hydro.yaml', import.meta.url));
const { machine } = readMachine(readFileSync(scenario, 'utf8'), { file: 'hut-hydro.yaml' });

console.log(`Node ${process.version}, ${cpus().length} x ${cpus()[0]?.model ?? 'unknown processor'}`);
benchSlices(machine); // first, so that its first time is cold
benchCommand(scenario);
benchSparse();
benchMesher();
