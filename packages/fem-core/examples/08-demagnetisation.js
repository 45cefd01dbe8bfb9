// A round magnet alone in unbounded space, magnetised across: its own field drives it beyond its knee. Builds on 05.
// Run: node packages/fem-core/examples/08-demagnetisation.js
// Then: put the knee at -600 kA/m; the magnet keeps to its recoil line.
import { buildDemagnetisationCurve, MU0, solveProbes } from '@gapwright/fem-core';

const [remanence, recoil] = [1.2, 1.05];
const kneeH = -300e3; // A/m
const kneeB = remanence + MU0 * recoil * kneeH;
const [endH, endB] = [kneeH - 60e3, kneeB - 0.8];
const { answers } = solveProbes(
  {
    outline: { kind: 'circle', centre: [0, 0], radius: 0.02 },
    open: true,
    background: 'air',
    regions: [{ name: 'magnet', shape: { kind: 'circle', centre: [0, 0], radius: 0.01 } }],
  },
  {
    materials: {
      air: { kind: 'linear', muR: 1 },
      magnet: {
        kind: 'directed-magnet',
        direction: { angle: Math.PI / 2 },
        recoil,
        along: buildDemagnetisationCurve([
          [0, remanence],
          [kneeH, kneeB],
          [endH, endB],
        ]),
      },
    },
  },
  [{ kind: 'mean', name: 'magnet', over: ['magnet'] }],
  { accuracy: 1e-4 },
);

// The field in a round body magnetised across is uniform, and B = -mu0 H in it: where that line meets the curve below the knee.
const slope = (kneeB - endB) / (kneeH - endH);
const h = (slope * kneeH - kneeB) / (slope + MU0);
console.log(
  `B in the magnet: ${answers[0].by.toFixed(4)} T; without a knee it would be ${(remanence / (1 + recoil)).toFixed(4)} T`,
);
console.log(`check: -mu0 H at the crossing = ${-MU0 * h}, got ${answers[0].by}, within 1e-3`);
