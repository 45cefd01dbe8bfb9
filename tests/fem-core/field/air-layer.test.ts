import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Setup } from '../../../packages/fem-core/src/assembly/setup.js';
import { airLayer } from '../../../packages/fem-core/src/field/air-layer.js';
import type { Point, Section } from '../../../packages/fem-core/src/geometry/section.js';
import { edgeCount } from '../../../packages/fem-core/src/mesh/mesh.js';
import { meshSection } from '../../../packages/fem-core/src/mesh/mesh-section.js';

/** A parallelogram that repeats to the right, with a ball near one of its slanted sides, or across it. */
function leaning(scale: number, shift: number, at: number): { readonly section: Section; readonly setup: Setup } {
  const place = (x: number, y: number): Point => [scale * x + shift, scale * y];
  return {
    section: {
      outline: { kind: 'polygon', corners: [place(0, 0), place(1, 0), place(1.2, 1), place(0.2, 1)] },
      background: 'air',
      maxEdge: 0.2 * scale,
      regions: [{ name: 'ball', shape: { kind: 'circle', centre: place(at, 0.5), radius: 0.15 * scale } }],
      matched: [['edge 2', 'edge 4']],
    },
    setup: {
      materials: { air: { kind: 'linear', muR: 1 }, ball: { kind: 'linear', muR: 100 } },
      edges: { 'edge 2': { kind: 'repeating' }, 'edge 4': { kind: 'repeating' } },
    },
  };
}

test('the layer goes on over repeating sides, however their distance is rounded', () => {
  let worst = 0;
  fc.assert(
    fc.property(
      fc.double({ min: 1e-3, max: 2, noNaN: true }),
      fc.constantFrom(0, 0.3, 7, 1000 / 3),
      fc.double({ min: 0.3, max: 0.6, noNaN: true }),
      (scale, shift, at) => {
        const { section, setup } = leaning(scale, scale * shift, at);
        const mesh = meshSection(section);
        const report = { converged: true, steps: 0, residuals: [], stepLengths: [], unknowns: 0, factorEntries: 0 };
        const layer = airLayer({ mesh, setup, potential: new Float64Array(0), report }, ['ball']);
        for (let e = 0; e < edgeCount(mesh); e++) {
          const mate = mesh.edgeToMatch[e];
          if (mate < 0) continue;
          for (const k of [0, 1]) {
            worst = Math.max(worst, Math.abs(layer[mesh.edges[2 * e + k]] - layer[mesh.edges[2 * mate + k]]));
          }
        }
      },
    ),
    { seed: 5, numRuns: 100 },
  );
  expect(worst).toBeLessThan(1e-6);
});
