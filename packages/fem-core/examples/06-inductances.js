// Inductance matrix of two conductors in a steel tube, apparent and incremental, about a solved field. Builds on 02 and 03.
// Run: node packages/fem-core/examples/06-inductances.js
// Then: raise the current; the incremental inductances fall first, as dB/dH of the steel does.
import { buildBHCurve, inductancesAt, MU0, solveProbes } from '@gapwright/fem-core';

// B = mu0 H + Js H/(H + h), a steel with its derivative in closed form (Froehlich 1881).
const [js, h0] = [1.9, 250];
const rows = Array.from({ length: 400 }, (_, i) => {
  const h = h0 * Math.expm1(0.02 * i);
  return [h, MU0 * h + (js * h) / (h + h0)];
});
const air = { kind: 'linear', muR: 1 };
const [wire, from, to, bore, outside] = [0.003, 0.006, 0.009, 0.02, 0.05];
const disc = (name, radius) => ({ name, shape: { kind: 'circle', centre: [0, 0], radius } });
const amperes = 150;
const solved = solveProbes(
  {
    outline: { kind: 'circle', centre: [0, 0], radius: outside }, // the current returns over the outline, where A = 0
    background: 'tube',
    regions: [disc('bore', bore), disc('sleeve', to), disc('within', from), disc('wire', wire)],
  },
  {
    materials: { tube: { kind: 'curve', curve: buildBHCurve(rows) }, bore: air, sleeve: air, within: air, wire: air },
    current: { wire: amperes },
  },
  [{ kind: 'linkage', name: 'sleeve', of: 'sleeve', turns: 1 }],
  { accuracy: 1e-4 },
);

const { names, apparent, incremental, error, coupling } = inductancesAt(solved, [
  { name: 'wire', sides: [{ region: 'wire', turns: 1 }] },
  { name: 'sleeve', sides: [{ region: 'sleeve', turns: 1 }] },
]);
for (const [i, name] of names.entries()) {
  const row = incremental[i].map((l, j) => `${(1e6 * l).toFixed(3)} +- ${(1e6 * error[i][j]).toPrecision(1)}`);
  console.log(`${name}: ${row.join(', ')} uH/m`);
}
console.log(`coupling ${coupling.toFixed(4)}`);

// H = I/(2 pi r) whatever the steel. The flux outside the sleeve links all of it, of the flux within it the mean over its area.
const spread = 0.5 - (from ** 2 * Math.log(to / from)) / (to ** 2 - from ** 2);
const inAir = (MU0 / (2 * Math.PI)) * (spread + Math.log(bore / to) + Math.log(outside / bore));
const c = 2 * Math.PI * h0;
const [near, far] = [amperes + c * bore, amperes + c * outside];
const chord = inAir + (js / c) * Math.log(far / near); // (integral of B dr)/I
const slope = chord + ((js * amperes) / c) * (1 / far - 1 / near); // and its derivative by I
const [{ linkage }] = solved.answers;
console.log(`check: linkage of the sleeve by M I = ${linkage}, got ${apparent[0][1] * amperes}, within 1e-9`);
console.log(`check: apparent M = ${chord}, got ${apparent[0][1]}, within 1e-4`);
console.log(`check: incremental M = ${slope}, got ${incremental[0][1]}, within 1e-4`);
