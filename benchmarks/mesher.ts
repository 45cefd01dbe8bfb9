import type { Section } from '@gapwright/fem-core';
import { checkMesh, measureMesh, meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import { medianMs, ms, printTable } from './timing.js';

/** A square with a round hole's outline and a bar in it, so that arcs, corners and grading all take part. */
const section = (maxEdge: number): Section => ({
  outline: { kind: 'rectangle', from: [0, 0], to: [1, 1] },
  background: 'air',
  maxEdge,
  regions: [
    { name: 'round', shape: { kind: 'circle', centre: [0.35, 0.4], radius: 0.2 }, maxEdge: maxEdge / 2 },
    { name: 'bar', shape: { kind: 'rectangle', from: [0.65, 0.2], to: [0.72, 0.85] } },
  ],
});

/** Triangles a second, from the drawing to the six-node mesh, and the smallest angle as a check. */
export function benchMesher(): void {
  console.log('\nmesher: square with a circle and a bar, from drawing to six-node mesh');
  const rows: string[][] = [['triangles', 'ms', 'triangles/s', 'smallest angle, deg']];
  for (const [maxEdge, runs, warmUp] of [
    [0.032, 15, 60],
    [0.0112, 7, 12],
    [0.0045, 3, 2],
  ] as const) {
    const mesh = meshSection(section(maxEdge));
    checkMesh(mesh);
    const time = medianMs(runs, () => meshSection(section(maxEdge)), warmUp);
    const triangles = triangleCount(mesh);
    rows.push([
      `${triangles}`,
      ms(time),
      ((1000 * triangles) / time).toFixed(0),
      measureMesh(mesh).minAngleDeg.toFixed(1),
    ]);
  }
  printTable(rows);
}
