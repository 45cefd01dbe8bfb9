import type { Mesh } from '@gapwright/fem-core/mesh';
import { checkMesh, measureMesh, meshSection, regionAreas } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { circle, drawing, polygon, rectangle } from '../geometry/drawings.js';
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

  test.each<[string, RegExp, (copy: Mesh) => void]>([
    ['a region that is none', /triangle \d+ lies in no region/, ({ triangleToRegion }) => triangleToRegion.fill(9)],
    [
      'a side off any drawn line',
      /is on a side and on no drawn line/,
      ({ edgeToCurve }) => edgeToCurve.fill(-1, onSide, onSide + 1),
    ],
    [
      'a middle that is not',
      /the middle of straight edge \d+ is not half-way/,
      ({ middles }) => middles.fill(middles[2 * inside] + 1e-9, 2 * inside, 2 * inside + 1),
    ],
    [
      'a bend that is told wrong',
      /triangle \d+ is curved and not said/,
      ({ curved }) => curved.fill(1, free, free + 1),
    ],
    [
      'matched edges, one of them left alone',
      /edge \d+ of a matched side has no match/,
      ({ edgeToMatch }) => {
        edgeToMatch[edgeToMatch[matched]] = -1;
        edgeToMatch[matched] = -1;
      },
    ],
    [
      'matches along the side by one place',
      /edges \d+ and \d+ do not correspond/,
      ({ edgeToMatch }) => {
        const other = edgeToMatch.findIndex(
          (mate, e) => mate >= 0 && e !== matched && mesh.edgeToSide[e] === mesh.edgeToSide[matched],
        );
        const [p, q] = [edgeToMatch[matched], edgeToMatch[other]];
        edgeToMatch.set([q], matched);
        edgeToMatch.set([matched], q);
        edgeToMatch.set([p], other);
        edgeToMatch.set([other], p);
      },
    ],
  ])('%s', (_, message, spoil) => {
    expect(() => checkMesh(spoiled(spoil))).toThrow(message);
  });

  test('areas and angles that are not those expected', () => {
    const areas = [0.8, 0.2];
    expect(() => checkMesh(mesh, { area: 1, regionAreas: areas, minFreeAngleDeg: 25 })).not.toThrow();
    expect(() => checkMesh(mesh, { area: 1.001 })).toThrow(/the mesh covers 1\S* m\^2, not 1\.001 m\^2/);
    expect(() => checkMesh(mesh, { regionAreas: [0.7, 0.3] })).toThrow(
      /region 'air' covers 0\.8\d* m\^2, not 0\.7 m\^2/,
    );
    expect(() => checkMesh(mesh, { minFreeAngleDeg: 50 })).toThrow(
      /an angle is [234]\d\.?\d* degrees, away from sharp corners/,
    );
  });

  test('a kite cut the long way is not Delaunay, and told with its edge', () => {
    const grid = gridMesh({ from: [0, 0], to: [1, 1], columns: 1, rows: 1, regionNames: ['air'], regionAt: () => 0 });
    const xy = Float64Array.from([0, 0, 1, 0, 0, 1, 2, 2]);
    const middles = grid.middles.slice();
    for (let k = 0; k < middles.length; k++)
      middles[k] = 0.5 * (xy[2 * grid.edges[k - (k % 2)] + (k % 2)] + xy[2 * grid.edges[k - (k % 2) + 1] + (k % 2)]);
    const edgeToSide = Int32Array.from(grid.edges.subarray(0, grid.edges.length / 2), (_, e) =>
      grid.triangleToEdge.filter((edge) => edge === e).length === 1 ? 0 : -1,
    );
    const edgeToCurve = edgeToSide;
    const kite: Mesh = {
      ...grid,
      xy,
      middles,
      edgeToSide,
      edgeToCurve,
      curves: [{ kind: 'line' }],
      sideNames: ['rim'],
    };
    expect(() => checkMesh(kite)).toThrow(/edge \d is not Delaunay: its opposite angles pass pi by 0\.\d+/);
  });

  test('a curved edge that turns its triangle over', () => {
    const disc = meshSection(drawing([circle(0.5, 0.5, 0.3)]));
    const e = disc.edgeToCurve.findIndex((curve) => curve >= 0 && disc.curves[curve].kind === 'arc');
    const middles = disc.middles.slice();
    for (const i of [0, 1]) middles[2 * e + i] += 2 * (middles[2 * e + i] - 0.5);
    expect(() => checkMesh({ ...disc, middles })).toThrow(/the map of curved triangle \d+ turns over/);
  });

  test('an open section whose infinity is elsewhere, or whose image has lost a part', () => {
    const open = meshSection(drawing([circle(0.5, 0.5, 0.3)], { open: true }));
    const { beyond } = open;
    if (beyond === undefined) throw new Error('nothing beyond');
    expect(() => checkMesh(open)).not.toThrow();
    expect(() => checkMesh({ ...open, beyond: { ...beyond, infinity: beyond.infinity + 1 } })).toThrow(
      /does not stand at the centre/,
    );
    expect(() => checkMesh({ ...open, beyond: { ...beyond, radius: 1.01 * beyond.radius } })).toThrow(
      /the far disc has \S+ m\^2/,
    );
    const { beyond: _, ...closed } = open;
    expect(() => checkMesh(closed)).toThrow(/the mesh is in 2 pieces, not 1/);
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
    expect(measureMesh(square)).toEqual({
      minAngleDeg: expect.closeTo(45, 12),
      minFreeAngleDeg: expect.closeTo(45, 12),
      regionArea: [1],
      roundArea: [1],
      notDelaunay: 0,
    });
  });

  test('a kite cut along its long diagonal is not Delaunay', () => {
    const kite = { ...square, xy: Float64Array.from([0, 0, 1, 0, 0, 1, 2, 2]) }; // the cut runs from (0, 0) to (2, 2)
    const quality = measureMesh(kite);
    expect(quality.notDelaunay).toBe(1);
    expect(quality.minAngleDeg).toBeCloseTo((Math.atan2(2, 1) * 180) / Math.PI - 45, 12);
    expect(quality.regionArea[0]).toBeCloseTo(2, 14);
  });

  test('round areas are those drawn, where circles are', () => {
    const disc = meshSection(drawing([circle(0.5, 0.5, 0.3), circle(0.6, 0.5, 0.1)]));
    const [air, ring, pin] = measureMesh(disc).roundArea;
    expect(air).toBeCloseTo(1 - 0.09 * Math.PI, 13);
    expect(ring).toBeCloseTo(0.08 * Math.PI, 13);
    expect(pin).toBeCloseTo(0.01 * Math.PI, 13);
  });

  test('free angles leave out sharp corners of the drawing alone', () => {
    const wedge = measureMesh(meshSection(drawing([polygon([0.1, 0.5], [0.9, 0.5], [0.9, 0.55])])));
    expect(wedge.minAngleDeg).toBeCloseTo((Math.atan2(0.05, 0.8) * 180) / Math.PI, 1);
    expect(wedge.minFreeAngleDeg).toBeGreaterThan(25 - 1e-9);
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
