import type { Mesh } from '@gapwright/fem-core';
import { checkMesh, measureMesh, meshSection, regionAreas } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { circle, drawing, rectangle } from '../geometry/drawings.js';
import { gridMesh } from '../io/grid-mesh.js';

const mesh = meshSection(drawing([rectangle(0.2, 0.2, 0.6, 0.7)], { maxEdge: 0.2, matched: [['left', 'right']] }));

/** The mesh with some of its arrays changed in place by `spoil`. */
function spoiled(spoil: (copy: Mesh) => void): Mesh {
  const copy = structuredClone(mesh);
  spoil(copy);
  return copy;
}

const onSide = mesh.edgeToSide.findIndex((side) => side >= 0);
const inside = mesh.edgeToCurve.findIndex((curve, e) => curve < 0 && mesh.edgeToSide[e] < 0);
const matched = mesh.edgeToMatch.findIndex((mate) => mate >= 0);
/** A triangle with no edge on a drawn line. */
const free = mesh.triangleToRegion.findIndex((_, t) =>
  [0, 1, 2].every((k) => mesh.edgeToCurve[mesh.triangleToEdge[3 * t + k]] < 0),
);

describe('checkMesh', () => {
  test('holds of a mesh as it is made', () => {
    expect(() => checkMesh(mesh)).not.toThrow();
  });

  test.each<[string, RegExp, (copy: Mesh) => void]>([
    ['a triangle turned over', /is not counter-clockwise/, ({ triangles }) => triangles.subarray(0, 3).reverse()],
    [
      'a corner on the far side',
      /is not counter-clockwise/,
      ({ xy, triangles }) => xy.fill(5, 2 * triangles[0], 2 * triangles[0] + 1),
    ],
    [
      'an edge with another end',
      /does not join corners/,
      ({ edges }) => edges.fill(mesh.edges[2 * inside + 1], 2 * inside, 2 * inside + 1),
    ],
    ['an outline edge on no side', /lies on no side/, ({ edgeToSide }) => edgeToSide.fill(-1, onSide, onSide + 1)],
    ['an inner edge on a side', /is on a side and inside/, ({ edgeToSide }) => edgeToSide.fill(0, inside, inside + 1)],
    [
      'a neighbour that is none',
      /disagree/,
      ({ neighbours }) => neighbours.fill((free + 2) % 5, 3 * free, 3 * free + 1),
    ],
    [
      'a region without a border',
      /off any drawn line/,
      ({ triangleToRegion }) => triangleToRegion.fill(1 - mesh.triangleToRegion[free], free, free + 1),
    ],
    [
      'a match that is not mutual',
      /is not the match of its match/,
      ({ edgeToMatch }) => edgeToMatch.fill(inside, matched, matched + 1),
    ],
    [
      'matched ends the wrong way round',
      /do not correspond/,
      ({ edges }) => edges.subarray(2 * matched, 2 * matched + 2).reverse(),
    ],
  ])('%s', (_, message, spoil) => {
    expect(() => checkMesh(spoiled(spoil))).toThrow(message);
  });

  test('an edge of no triangle, and a corner of none', () => {
    const extraEdge: Mesh = {
      ...mesh,
      edges: Int32Array.from([...mesh.edges, 0, 1]),
      edgeToCurve: Int32Array.from([...mesh.edgeToCurve, -1]),
      edgeToSide: Int32Array.from([...mesh.edgeToSide, -1]),
      edgeToMatch: Int32Array.from([...mesh.edgeToMatch, -1]),
    };
    expect(() => checkMesh(extraEdge)).toThrow(/belongs to 0 triangles/);
    expect(() => checkMesh({ ...mesh, xy: Float64Array.from([...mesh.xy, 0.5, 0.5]) })).toThrow(/Euler/);
  });
});

describe('measureMesh', () => {
  const square = gridMesh({ from: [0, 0], to: [1, 1], columns: 1, rows: 1, regionNames: ['air'], regionAt: () => 0 });

  test('a square cut in two has half right angles and is Delaunay', () => {
    expect(measureMesh(square)).toEqual({ minAngleDeg: expect.closeTo(45, 12), regionArea: [1], notDelaunay: 0 });
  });

  test('a kite cut along its long diagonal is not Delaunay', () => {
    const kite = { ...square, xy: Float64Array.from([0, 0, 1, 0, 0, 1, 2, 2]) }; // the cut runs from (0, 0) to (2, 2)
    const quality = measureMesh(kite);
    expect(quality.notDelaunay).toBe(1);
    expect(quality.minAngleDeg).toBeCloseTo((Math.atan2(2, 1) * 180) / Math.PI - 45, 12);
    expect(quality.regionArea[0]).toBeCloseTo(2, 14);
  });

  test('corner areas are those of the regions where nothing is round, and smaller where they are', () => {
    expect(measureMesh(mesh).regionArea[1]).toBeCloseTo(regionAreas(mesh)[1], 14);
    const disc = meshSection(drawing([circle(0.5, 0.5, 0.3)]));
    const chords = measureMesh(disc).regionArea[1];
    expect(chords).toBeLessThan(regionAreas(disc)[1]);
    const count = disc.edgeToCurve.filter((curve) => curve >= 0 && disc.curves[curve].kind === 'arc').length;
    expect(chords).toBeCloseTo(0.5 * count * 0.09 * Math.sin((2 * Math.PI) / count), 12); // a regular polygon
  });
});
