// The force by Maxwell's stress, held against virtual work: the derivative of the energy along a small shift. Builds on 03.
// Run: node packages/fem-core/examples/07-virtual-work.js
// Then: shift the bar sideways instead.
import { solveProbes } from '@gapwright/fem-core';

const air = { kind: 'linear', muR: 1 };
function solveAt(y) {
  return solveProbes(
    {
      outline: { kind: 'rectangle', from: [-0.06, -0.05], to: [0.06, 0.05] },
      background: 'air',
      regions: [
        { name: 'magnet', shape: { kind: 'rectangle', from: [-0.01, y], to: [0.01, y + 0.01] } },
        { name: 'plate', shape: { kind: 'rectangle', from: [-0.03, -0.02], to: [0.03, -0.012] } },
      ],
    },
    {
      materials: {
        air,
        magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] },
        plate: { kind: 'linear', muR: 1000 },
      },
    },
    [{ kind: 'force', name: 'pull', on: ['magnet'] }],
    { accuracy: 2e-4 },
  );
}

const step = 0.0005;
const [below, here, above] = [-step, 0, step].map(solveAt);
// Magnets of constant remanence: the energy as counted here, (B - Br)^2/(2 mu) in them, falls by the work done.
const byWork = -(above.energy - below.energy) / (2 * step);
const [{ fy, error }] = here.answers;
console.log(`by stress ${fy.toFixed(2)} +- ${error.force.toFixed(2)} N/m, by work ${byWork.toFixed(2)} N/m`);
console.log(`check: -dW/dy = ${byWork}, got ${fy}, within 1e-2`);
