// The field of a round wire in the middle of a closed tube: section -> field -> value at a point.
// Run: node packages/fem-core/examples/01-wire-in-a-tube.js
// Then: move the wire off the middle; the field outside it is no longer mu0 I/(2 pi r).
import { buildLocator, MU0, solveSection, valueAt } from '@gapwright/fem-core';

const section = {
  outline: { kind: 'circle', centre: [0, 0], radius: 0.02 },
  background: 'air',
  maxEdge: 0.002,
  regions: [{ name: 'wire', shape: { kind: 'circle', centre: [0, 0], radius: 0.002 }, maxEdge: 0.0005 }],
};
const setup = {
  materials: { air: { kind: 'linear', muR: 1 }, wire: { kind: 'linear', muR: 1 } },
  current: { wire: 10 }, // A, out of the page; the tube's wall is closed: A = 0
};

const field = solveSection(section, setup);
const value = valueAt(field, buildLocator(field.mesh), 0.01, 0);
const expected = (MU0 * 10) / (2 * Math.PI * 0.01);
console.log(`B at 10 mm: ${(1e6 * Math.hypot(value.bx, value.by)).toFixed(2)} uT`);
console.log(`check: mu0 I/(2 pi r) = ${expected}, got ${value.by}, within 5e-3`);
