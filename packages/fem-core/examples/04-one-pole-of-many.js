// One pole of an endless row of magnets: the sides are reversing, so that A goes on with the other sign. Harmonics of the
// field along a line. Builds on 03.
// Run: node packages/fem-core/examples/04-one-pole-of-many.js
// Then: take `repeating` sides and two poles instead; the harmonics stay.
import { buildLocator, lineHarmonics, solveProbes } from '@gapwright/fem-core';

const [pole, width, height, gap] = [0.04, 0.024, 0.01, 0.01]; // m; steel faces the magnet across the gap and stands behind it
const { field, recovered } = solveProbes(
  {
    outline: { kind: 'rectangle', from: [-pole / 2, 0], to: [pole / 2, height + gap] },
    background: 'air',
    regions: [{ name: 'magnet', shape: { kind: 'rectangle', from: [-width / 2, 0], to: [width / 2, height] } }],
    matched: [['left', 'right']],
  },
  {
    materials: { air: { kind: 'linear', muR: 1 }, magnet: { kind: 'magnet', recoil: 1, remanence: [0, 1.2] } },
    edges: {
      left: { kind: 'reversing' },
      right: { kind: 'reversing' },
      bottom: { kind: 'crossing' }, // ideal steel
      top: { kind: 'crossing' },
    },
  },
  [{ kind: 'flux', name: 'pole', from: [-pole / 2, height + gap], to: [pole / 2, height + gap] }],
  { accuracy: 1e-3 },
);

// The pole is half a wave: of a line along it taken as one period, twice, only the odd orders of the whole wave are there.
const y = height + gap;
const k = Math.PI / pole;
const { mesh } = field;
const half = lineHarmonics(field, buildLocator(mesh), [-pole / 2, y], [pole / 2, y], 0, recovered).across.cos[0];
// By at the steel is sum_n R_n cos(k_n x)/(cosh k_n g + sinh k_n g coth k_n h); its mean over the pole:
let expected = 0;
for (let n = 1; n < 60; n += 2) {
  const [kn, rn] = [n * k, ((4 * 1.2) / (n * Math.PI)) * Math.sin((n * Math.PI * width) / (2 * pole))];
  const wave = rn / (Math.cosh(kn * gap) + Math.sinh(kn * gap) / Math.tanh(kn * height));
  expected += (wave * 2 * Math.sin((n * Math.PI) / 2)) / (n * Math.PI);
}
console.log(`mean flux density over the pole at the steel: ${half.toFixed(4)} T`);
console.log(`check: series of the strip = ${expected}, got ${half}, within 3e-3`);
