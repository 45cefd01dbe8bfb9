// Inductance matrix of two coils on a core, apparent and incremental, about a solved field. Builds on 02 and 03.
// Run: node packages/fem-core/examples/06-inductances.js
// Then: raise the current; the incremental inductances fall first.
import { inductancesAt, MU0, solveProbes } from '@gapwright/fem-core';

const air = { kind: 'linear', muR: 1 };
const rect = (name, x0, y0, x1, y1) => ({ name, shape: { kind: 'rectangle', from: [x0, y0], to: [x1, y1] } });
const gap = 0.001;
const solved = solveProbes(
  {
    outline: { kind: 'rectangle', from: [0, 0], to: [0.1, 0.08] },
    background: 'air',
    regions: [
      rect('core', 0.02, 0.01, 0.08, 0.07),
      rect('window', 0.03, 0.02, 0.07, 0.06),
      rect('gap', 0.07, 0.04 - gap / 2, 0.08, 0.04 + gap / 2),
      rect('a out', 0.014, 0.025, 0.019, 0.055),
      rect('a in', 0.031, 0.025, 0.036, 0.055),
      rect('b in', 0.064, 0.042, 0.069, 0.055),
      rect('b out', 0.081, 0.042, 0.086, 0.055),
    ],
  },
  {
    materials: {
      air,
      window: air,
      gap: air,
      'a out': air,
      'a in': air,
      'b out': air,
      'b in': air,
      core: { kind: 'linear', muR: 1e5 },
    },
    current: { 'a out': -100, 'a in': 100 },
  },
  [],
  { accuracy: 1e-3 },
);

const { names, incremental, error, coupling } = inductancesAt(solved, [
  {
    name: 'a',
    sides: [
      { region: 'a in', turns: 100 },
      { region: 'a out', turns: -100 },
    ],
  },
  {
    name: 'b',
    sides: [
      { region: 'b out', turns: 50 },
      { region: 'b in', turns: -50 },
    ],
  },
]);
for (const [i, name] of names.entries()) {
  const row = incremental[i].map((l, j) => `${(1e3 * l).toFixed(3)} +- ${(1e3 * error[i][j]).toFixed(3)}`);
  console.log(`${name}: ${row.join(', ')} mH/m`);
}
console.log(`coupling ${coupling.toFixed(4)}`);
// Of a core that hardly needs any field all the field is in the gap, and fringes about one gap round it.
const ideal = (100 * 50 * MU0 * (0.01 + gap)) / gap;
console.log(`check: N1 N2 mu0 (w + g)/g = ${ideal}, got ${Math.abs(incremental[0][1])}, within 0.2`);
