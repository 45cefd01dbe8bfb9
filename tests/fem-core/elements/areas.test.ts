import { meshSection, regionAreas, triangleCount } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { FULL_RULE, gradients, nodeCoordinates } from '../../../packages/fem-core/src/elements/six-node.js';
import { relativeError } from '../../laws/sections.js';

const mesh = meshSection({
  outline: { kind: 'rectangle', from: [-1, -1], to: [2, 1] },
  background: 'air',
  maxEdge: 0.4,
  regions: [
    { name: 'ring', shape: { kind: 'circle', centre: [0.3, 0.1], radius: 0.7 } },
    { name: 'hole', shape: { kind: 'circle', centre: [0.3, 0.1], radius: 0.3 } },
  ],
});

test('areas are the integrals of det J, bulging and hollow edges alike', () => {
  const areas = mesh.regionNames.map(() => 0);
  const [at, grad] = [new Float64Array(12), new Float64Array(12)];
  for (let t = 0; t < triangleCount(mesh); t++) {
    nodeCoordinates(mesh, t, at);
    for (let q = 0; q < FULL_RULE.count; q++) {
      areas[mesh.triangleToRegion[t]] += FULL_RULE.weights[q] * gradients(at, FULL_RULE.slopes, 12 * q, grad);
    }
  }
  expect(mesh.curved).toContain(1);
  regionAreas(mesh).forEach((area, region) => {
    expect(relativeError(area, areas[region])).toBeLessThan(1e-13);
  });
});

test('together they are the area of the outline', () => {
  expect(
    relativeError(
      regionAreas(mesh).reduce((a, b) => a + b),
      6,
    ),
  ).toBeLessThan(1e-14);
});
