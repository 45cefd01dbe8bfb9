// Answers to a wanted accuracy: probes say what is wanted, the mesh refines itself for them, and each answer has the bound
// of its error. Builds on 01.
// Run: node packages/fem-core/examples/03-wanted-accuracy.js
// Then: ask for 1e-6 and see what it costs.
import { MU0, solveProbes } from '@gapwright/fem-core';

const [wireRadius, tubeRadius, amperes] = [0.002, 0.02, 10];
const air = { kind: 'linear', muR: 1 };
const answer = solveProbes(
  {
    outline: { kind: 'circle', centre: [0, 0], radius: tubeRadius },
    background: 'air',
    regions: [{ name: 'wire', shape: { kind: 'circle', centre: [0, 0], radius: wireRadius } }],
  },
  { materials: { air, wire: air }, current: { wire: amperes } },
  [{ kind: 'linkage', name: 'flux of the wire', of: 'wire', turns: 1 }],
  {
    accuracy: 1e-4,
    onMesh: ({ triangles, error }) => console.log(`${triangles} triangles, ${(100 * error).toFixed(4)} %`),
  },
);

const [{ linkage, error }] = answer.answers;
console.log(`linkage ${linkage} +- ${error} Wb/m; energy ${answer.energy} +- ${answer.energyError} J/m`);
const expected = ((MU0 * amperes) / (2 * Math.PI)) * (0.25 + Math.log(tubeRadius / wireRadius));
console.log(`check: mu0 I/(2 pi) (1/4 + ln R/a) = ${expected}, got ${linkage}, within 1e-4`);
