// Steel by a B-H table: Newton's method, and what its report tells. Builds on 01.
// Run: node packages/fem-core/examples/02-steel-and-newton.js
// Then: raise the current until the ring saturates, and watch the number of steps.
import { buildBHCurve, buildLocator, fluxBetween, solveSection } from '@gapwright/fem-core';

const rows = [
  [0, 0],
  [200, 0.9],
  [500, 1.3],
  [2000, 1.6],
  [20000, 2.0],
];
const section = {
  outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
  background: 'air',
  regions: [
    { name: 'ring', shape: { kind: 'circle', centre: [0, 0], radius: 0.04 }, maxEdge: 0.004 },
    { name: 'bore', shape: { kind: 'circle', centre: [0, 0], radius: 0.03 } },
    { name: 'wire', shape: { kind: 'circle', centre: [0, 0], radius: 0.005 } },
  ],
};
const air = { kind: 'linear', muR: 1 };
const field = solveSection(
  section,
  {
    materials: { air, bore: air, wire: air, ring: { kind: 'curve', curve: buildBHCurve(rows) } },
    current: { wire: 2 * Math.PI * 0.035 * 500 }, // H = 500 A/m in the middle of the ring
  },
  { tolerance: 1e-12 },
);

const { residuals, steps } = field.report;
console.log(`${steps} steps, residuals ${residuals.map((r) => r.toExponential(1)).join(' ')}`);
// The flux in the ring: integral of B(H) with H = I/(2 pi r), about 1.3 T over 10 mm.
const flux = Math.abs(fluxBetween(field, buildLocator(field.mesh), [0.03, 0], [0.04, 0]));
console.log(`check: flux in the ring = ${1.3 * 0.01}, got ${flux}, within 1e-2`);
