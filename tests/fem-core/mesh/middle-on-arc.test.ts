import type { Section } from '@gapwright/fem-core';
import { meshSection, refineMesh, regionAreas, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { middleOnArc } from '../../../packages/fem-core/src/mesh/middle-on-arc.js';

describe('middleOnArc', () => {
  const turn = fc.double({ min: -3, max: 3, noNaN: true }).filter((phi) => Math.abs(phi) > 1e-3);
  const start = fc.double({ min: 0, max: 6.3, noNaN: true });

  test('the parabola cuts off the area of the circular segment, whichever way the arc runs', () => {
    fc.assert(
      fc.property(start, turn, fc.double({ min: 0.1, max: 10, noNaN: true }), (from, phi, radius) => {
        const arc = { kind: 'arc', centre: [0, 0], radius } as const;
        const [ax, ay] = [radius * Math.cos(from), radius * Math.sin(from)];
        const [bx, by] = [radius * Math.cos(from + phi), radius * Math.sin(from + phi)];
        const [x, y] = middleOnArc(arc, ax, ay, bx, by);
        const rise = (by - ay) * (x - 0.5 * (ax + bx)) - (bx - ax) * (y - 0.5 * (ay + by)); // times the chord
        // The series of phi - sin phi, taken so far that nothing is left of it.
        let [term, wanted] = [phi, 0];
        for (let k = 3; k < 40; k += 2) {
          term *= -(phi * phi) / (k * (k - 1));
          wanted -= 0.5 * radius ** 2 * term;
        }
        expect((2 / 3) * rise).toBeCloseTo(wanted, 12);
        expect(Math.abs(((2 / 3) * rise) / wanted - 1)).toBeLessThan(1e-11 / Math.abs(phi));
      }),
      { seed: 71, numRuns: 300 },
    );
  });

  test('it stands over the middle of the chord', () => {
    const [x, y] = middleOnArc({ kind: 'arc', centre: [0, 0], radius: 5 }, 3, -4, 3, 4);
    expect(y).toBeCloseTo(0, 15);
    expect(x).toBeGreaterThan(5);
    expect(x).toBeLessThan(5.1);
  });
});

test.each([Infinity, 0.2, 0.03])('a disc with edges up to %f m has the area pi r^2, also when refined', (maxEdge) => {
  const radius = 0.37;
  const section: Section = {
    outline: { kind: 'circle', centre: [0.2, -0.1], radius: 0.7 },
    background: 'air',
    ...(maxEdge === Infinity ? {} : { maxEdge }),
    regions: [{ name: 'disc', shape: { kind: 'circle', centre: [0.3, 0.05], radius } }],
  };
  const mesh = meshSection(section);
  const finer = refineMesh(
    mesh,
    Float64Array.from({ length: triangleCount(mesh) }, (_, t) => (t % 3 === 0 ? 0.04 : Infinity)),
  );
  for (const [outer, inner] of [regionAreas(mesh), regionAreas(finer)]) {
    expect(Math.abs(inner / (Math.PI * radius ** 2) - 1)).toBeLessThan(1e-12);
    expect(Math.abs((outer + inner) / (Math.PI * 0.49) - 1)).toBeLessThan(1e-12);
  }
});
