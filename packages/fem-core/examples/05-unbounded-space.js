// Two parallel wires in unbounded space: `open` sections end nowhere. Force on a body in air. Builds on 03.
// Run: node packages/fem-core/examples/05-unbounded-space.js
// Then: turn one current round; the wires push each other away.
import { MU0, solveProbes } from '@gapwright/fem-core';

const [distance, radius, amperes] = [0.02, 0.002, 10];
const air = { kind: 'linear', muR: 1 };
const wire = (name, x) => ({ name, shape: { kind: 'circle', centre: [x, 0], radius } });
const { answers } = solveProbes(
  {
    outline: { kind: 'circle', centre: [0, 0], radius: 0.03 },
    open: true,
    background: 'air',
    regions: [wire('left', -distance / 2), wire('right', distance / 2)],
  },
  { materials: { air, left: air, right: air }, current: { left: amperes, right: amperes } },
  [{ kind: 'force', name: 'pull on the left wire', on: ['left'] }],
  { accuracy: 1e-3 },
);

const [{ fx, error }] = answers;
console.log(`force on the left wire: ${fx} +- ${error.force} N/m: like currents attract`);
console.log(
  `check: mu0 I^2/(2 pi D) = ${(MU0 * amperes * amperes) / (2 * Math.PI * distance)}, got ${fx}, within 2e-3`,
);
