import type { Field, Material, Section, Setup } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection, nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import { globalNode, nodeCoordinates, shapeValues } from '../../../packages/fem-core/src/elements/six-node.js';

export const AIR: Material = { kind: 'linear', muR: 1 };

/** A rectangle of 60 mm by 40 mm with a block and a slanted bar within; all elements straight. */
export const straightSection = (maxEdge: number): Section => ({
  outline: { kind: 'rectangle', from: [-0.03, -0.02], to: [0.03, 0.02] },
  background: 'air',
  maxEdge,
  regions: [
    { name: 'block', shape: { kind: 'rectangle', from: [-0.02, -0.01], to: [-0.005, 0.01] }, maxEdge },
    {
      name: 'bar',
      shape: {
        kind: 'polygon',
        corners: [
          [0.005, -0.012],
          [0.022, 0.004],
          [0.018, 0.008],
          [0.001, -0.008],
        ],
      },
      maxEdge,
    },
  ],
});

export const ROUND = { x: 0.002, y: -0.001, radius: 0.03 };
export const ROD = { x: 0.006, y: 0.004, radius: 0.01 };

/** A round room of radius 30 mm, off the origin, with a rod of radius 10 mm in it. */
export const roundSection = (maxEdge: number): Section => ({
  outline: { kind: 'circle', centre: [ROUND.x, ROUND.y], radius: ROUND.radius },
  background: 'air',
  maxEdge,
  regions: [{ name: 'rod', shape: { kind: 'circle', centre: [ROD.x, ROD.y], radius: ROD.radius }, maxEdge }],
});

export const straightMesh = meshSection(straightSection(0.006));
export const roundMesh = meshSection(roundSection(0.006));

export const MESHES: readonly [name: string, mesh: Mesh][] = [
  ['straight', straightMesh],
  ['round', roundMesh],
];

/** Air wherever nothing else is said. */
export function fill(mesh: Mesh, materials: Setup['materials'] = {}): Setup {
  return { materials: { ...Object.fromEntries(mesh.regionNames.map((name) => [name, AIR])), ...materials } };
}

/** The field whose potential is the nodal interpolant of a given function; nothing is solved. */
export function interpolate(
  mesh: Mesh,
  a: (x: number, y: number) => number,
  materials: Setup['materials'] = {},
): Field {
  const report = { converged: true, steps: 0, residuals: [], stepLengths: [], unknowns: 0, factorEntries: 0 };
  const potential = Float64Array.from({ length: nodeCount(mesh) }, (_, node) => a(...nodePoint(mesh, node)));
  return { mesh, setup: fill(mesh, materials), potential, report };
}

/** Where the map of triangle t takes a point of the reference triangle. */
export function mapPoint(mesh: Mesh, t: number, xi: number, eta: number): readonly [x: number, y: number] {
  const at = nodeCoordinates(mesh, t, new Float64Array(12));
  const shapes = shapeValues(xi, eta, new Float64Array(6));
  let [x, y] = [0, 0];
  for (let i = 0; i < 6; i++) {
    x += shapes[i] * at[2 * i];
    y += shapes[i] * at[2 * i + 1];
  }
  return [x, y];
}

/** What the six nodal values of triangle t make at a point of the reference triangle. */
export function interpolantIn(field: Field, t: number, xi: number, eta: number): number {
  const shapes = shapeValues(xi, eta, new Float64Array(6));
  let a = 0;
  for (let i = 0; i < 6; i++) a += shapes[i] * field.potential[globalNode(field.mesh, t, i)];
  return a;
}
