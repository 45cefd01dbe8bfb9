// A solve in a worker, its field handed back without a copy; two solves in turn in one thread; and one called off.
// Run: node packages/fem-core/examples/10-worker-and-cancel.js
// Then: use the same functions in a browser's Worker; nothing here but the first lines of each side knows Node.
import { isMainThread, parentPort, Worker } from 'node:worker_threads';
import { drive, energiesOf, fieldBuffers, probeSteps, solveProbes } from '@gapwright/fem-core';

const air = { kind: 'linear', muR: 1 };
const section = {
  outline: { kind: 'rectangle', from: [-0.04, -0.03], to: [0.04, 0.03] },
  background: 'air',
  regions: [{ name: 'magnet', shape: { kind: 'rectangle', from: [-0.01, -0.005], to: [0.01, 0.005] } }],
};
const setup = { materials: { air, magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] } } };

if (isMainThread) await askAndCompare();
else {
  const { field } = solveProbes(section, setup, [], { accuracy: 1e-3 });
  parentPort.postMessage(field, fieldBuffers(field));
}

async function askAndCompare() {
  const worker = new Worker(new URL(import.meta.url));
  const field = await new Promise((resolve, reject) => {
    worker.once('message', resolve);
    worker.once('error', reject);
  });
  await worker.terminate();

  const pause = () => new Promise((go) => setTimeout(go));
  const solve = () => probeSteps(section, setup, [], { accuracy: 1e-3 });
  const [one, two] = await Promise.all([drive(solve(), { pause }), drive(solve(), { pause })]); // in turn, step by step
  console.log(`energies ${one.energy} and ${two.energy} J/m`);

  const never = new AbortController();
  const called = drive(solve(), { pause, signal: never.signal, onStep: () => never.abort() });
  console.log(`called off: ${await called.catch((reason) => reason.name)}`);
  console.log(`check: energy found here = ${one.energy}, got ${energiesOf(field).energy}, within 1e-14`);
}
