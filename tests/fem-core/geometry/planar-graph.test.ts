import type { Point, Section, Shape } from '@gapwright/fem-core';
import { sidesOf } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { PlanarGraph } from '../../../packages/fem-core/src/geometry/planar-graph.js';
import { buildPlanarGraph } from '../../../packages/fem-core/src/geometry/planar-graph.js';
import { orientation } from '../../../packages/fem-core/src/geometry/predicates.js';
import { boundsOf, contains } from '../../../packages/fem-core/src/geometry/shapes.js';
import { circle, drawing, faultCodes, moved, polar, polygon, polygons, rectangle, rectangles } from './drawings.js';

const pointAt = (graph: PlanarGraph, p: number): Point => [graph.points[2 * p], graph.points[2 * p + 1]];
const segmentCount = (graph: PlanarGraph): number => graph.segmentToCurve.length;
const endsOf = (graph: PlanarGraph, s: number): readonly [Point, Point] => [
  pointAt(graph, graph.segments[2 * s]),
  pointAt(graph, graph.segments[2 * s + 1]),
];
const holds = (graph: PlanarGraph, x: number, y: number): boolean =>
  Array.from({ length: graph.points.length / 2 }, (_, p) => pointAt(graph, p)).some(
    (at) => Math.hypot(at[0] - x, at[1] - y) < 1e-9,
  );

/** Lengths of segments on a curve kind, summed. */
function lengthOf(graph: PlanarGraph, kind: 'line' | 'arc'): number {
  let sum = 0;
  for (let s = 0; s < segmentCount(graph); s++) {
    if (graph.curves[graph.segmentToCurve[s]].kind !== kind) continue;
    const [a, b] = endsOf(graph, s);
    sum += Math.hypot(a[0] - b[0], a[1] - b[1]);
  }
  return sum;
}

/** Pairs of segments that cross, or of which one ends within the other. */
function clashes(graph: PlanarGraph): string[] {
  const found: string[] = [];
  const side = (s: number, p: number): number =>
    Math.sign(orientation(...endsOf(graph, s)[0], ...endsOf(graph, s)[1], ...pointAt(graph, p)));
  for (let s = 0; s < segmentCount(graph); s++) {
    for (let q = s + 1; q < segmentCount(graph); q++) {
      const [a, b, c, d] = [
        graph.segments[2 * s],
        graph.segments[2 * s + 1],
        graph.segments[2 * q],
        graph.segments[2 * q + 1],
      ];
      if (new Set([a, b, c, d]).size < 4) continue;
      if (side(s, c) * side(s, d) < 0 && side(q, a) * side(q, b) < 0) found.push(`${s} crosses ${q}`);
    }
    const [from, to] = endsOf(graph, s);
    const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
    for (let p = 0; p < graph.points.length / 2; p++) {
      const [x, y] = pointAt(graph, p);
      const along = ((x - from[0]) * (to[0] - from[0]) + (y - from[1]) * (to[1] - from[1])) / length;
      const off = Math.abs(orientation(...from, ...to, x, y)) / length;
      if (off < 1e-9 && along > 1e-9 && along < length - 1e-9) found.push(`point ${p} lies on ${s}`);
    }
  }
  return found;
}

describe('overlay', () => {
  test('shapes that share a border have it once', () => {
    const graph = buildPlanarGraph(drawing([rectangle(0.2, 0.2, 0.5, 0.6), rectangle(0.5, 0.2, 0.8, 0.6)]));
    expect(segmentCount(graph)).toBe(4 + 7);
    expect(lengthOf(graph, 'line')).toBeCloseTo(4 + 3 * 0.4 + 4 * 0.3, 12);
  });

  test('a shared border of unequal length is cut where the shorter ends', () => {
    const graph = buildPlanarGraph(drawing([rectangle(0.2, 0.2, 0.5, 0.6), rectangle(0.5, 0.3, 0.8, 0.4)]));
    expect(holds(graph, 0.5, 0.3) && holds(graph, 0.5, 0.4)).toBe(true);
    expect(lengthOf(graph, 'line')).toBeCloseTo(4 + 2 * 0.4 + 2 * 0.3 + 2 * 0.3 + 0.1, 12);
    expect(clashes(graph)).toEqual([]);
  });

  test('a corner that touches a border cuts it', () => {
    const graph = buildPlanarGraph(drawing([polygon([0.5, 0], [0.7, 0.3], [0.3, 0.3])]));
    expect(holds(graph, 0.5, 0)).toBe(true);
    expect(segmentCount(graph)).toBe(5 + 3);
    expect(clashes(graph)).toEqual([]);
  });

  test('nested shapes do not cut each other', () => {
    expect(segmentCount(buildPlanarGraph(drawing([rectangle(0.2, 0.2, 0.8, 0.8), circle(0.5, 0.5, 0.2)])))).toBe(24);
  });

  test('shapes that cross cut each other in common points', () => {
    const graph = buildPlanarGraph(drawing([rectangle(0.2, 0.4, 0.8, 0.6), rectangle(0.4, 0.2, 0.6, 0.8)]));
    for (const x of [0.4, 0.6]) for (const y of [0.4, 0.6]) expect(holds(graph, x, y)).toBe(true);
    expect(segmentCount(graph)).toBe(4 + 12 + 4);
    expect(clashes(graph)).toEqual([]);
  });

  test('the same shape drawn twice is drawn once, circles but for rounding too', () => {
    for (const shape of [rectangle(0.2, 0.2, 0.5, 0.6), circle(0.5, 0.5, 0.3)]) {
      const once = buildPlanarGraph(drawing([shape]));
      expect(buildPlanarGraph(drawing([shape, shape])).segments).toEqual(once.segments);
    }
    const graph = buildPlanarGraph(
      drawing([circle(0.5, 0.5, 0.3), circle(0.5 + 3e-10, 0.5, 0.3 - 2e-10), rectangle(0, 0, 1, 0.5 - 0.2999)]),
    );
    expect(graph.segmentToCurve.filter((curve) => graph.curves[curve].kind === 'arc')).toHaveLength(18);
  });

  test('corners nearer than the snapping distance are one', () => {
    const graph = buildPlanarGraph(
      drawing([rectangle(0.2, 0.2, 0.5, 0.6), rectangle(0.5 + 5e-10, 0.2 - 5e-10, 0.8, 0.6)]),
    );
    expect(segmentCount(graph)).toBe(4 + 7);
  });

  test('points of a circle lie on it, and where lines cross it on both', () => {
    const graph = buildPlanarGraph(drawing([circle(0.5, 0.5, 0.3), rectangle(0.1, 0.4, 0.9, 0.6)]));
    for (let s = 0; s < segmentCount(graph); s++) {
      if (graph.curves[graph.segmentToCurve[s]].kind === 'line') continue;
      for (const [x, y] of endsOf(graph, s)) expect(Math.hypot(x - 0.5, y - 0.5)).toBeCloseTo(0.3, 12);
    }
    const reach = Math.sqrt(0.3 ** 2 - 0.1 ** 2);
    for (const x of [0.5 - reach, 0.5 + reach]) for (const y of [0.4, 0.6]) expect(holds(graph, x, y)).toBe(true);
  });

  test.each([1, 3, 5])(
    'a line that cuts a cap of %f degrees off within one chord leaves cap and chord apart',
    (half) => {
      const [x, y, angle, radius] = [0.5, 0.5, 11.25, 0.3];
      const [p, q] = [polar(x, y, angle - half, radius), polar(x, y, angle + half, radius)];
      const beyond = (end: Point): Point => [end[0] + 0.1, end[1] + 0.02];
      const graph = buildPlanarGraph(drawing([circle(x, y, radius), polygon(p, beyond(p), beyond(q), q)]));
      const between = Array.from({ length: segmentCount(graph) }, (_, s) => s).filter((s) => {
        const ends = endsOf(graph, s);
        return [p, q].every((end) => ends.some((at) => Math.hypot(at[0] - end[0], at[1] - end[1]) < 1e-9));
      });
      expect(between.map((s) => graph.curves[graph.segmentToCurve[s]].kind)).toEqual(['line']);
      expect(holds(graph, ...polar(x, y, angle, radius))).toBe(true);
    },
  );

  test('no two segments cross and none passes through a point, whatever polygons are drawn, wherever', () => {
    const shapes = fc.array(fc.oneof(rectangles, polygons), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(shapes, fc.double({ min: 0, max: 6, noNaN: true }), (list, angle) => {
        const graph = buildPlanarGraph(moved(drawing(list), 1, angle, [2, -3]));
        expect(clashes(graph)).toEqual([]);
        const keys = Array.from({ length: segmentCount(graph) }, (_, s) =>
          [graph.segments[2 * s], graph.segments[2 * s + 1]].sort().join(),
        );
        expect(new Set(keys).size).toBe(keys.length);
      }),
      { seed: 31, numRuns: 150 },
    );
  });
});

/** Every segment of a matched side corresponds to one of the other by the same shift, ends in stored order. */
function expectMatched(graph: PlanarGraph, from: string, shift: Point): void {
  let seen = 0;
  for (let s = 0; s < segmentCount(graph); s++) {
    if (graph.sideNames[graph.segmentToSide[s]] !== from) continue;
    seen++;
    const mate = graph.segmentToMatch[s];
    expect(graph.segmentToMatch[mate]).toBe(s);
    const [ends, others] = [endsOf(graph, s), endsOf(graph, mate)];
    for (const k of [0, 1] as const) {
      expect(others[k][0] - ends[k][0]).toBeCloseTo(shift[0], 9);
      expect(others[k][1] - ends[k][1]).toBeCloseTo(shift[1], 9);
    }
  }
  expect(seen).toBeGreaterThan(0);
}

describe('matched sides', () => {
  test('each has the cuts of the other', () => {
    const graph = buildPlanarGraph(
      drawing([rectangle(0, 0.2, 0.1, 0.4), rectangle(0.9, 0.3, 1, 0.7)], { matched: [['left', 'right']] }),
    );
    for (const y of [0.2, 0.3, 0.4, 0.7]) for (const x of [0, 1]) expect(holds(graph, x, y)).toBe(true);
    expectMatched(graph, 'left', [1, 0]);
    expect(graph.segmentToMatch.filter((mate) => mate >= 0)).toHaveLength(10);
  });

  test('a region flush with one side is cut where the other side is', () => {
    const graph = buildPlanarGraph(
      drawing([rectangle(0.6, 0.1, 1, 0.5), rectangle(0, 0.3, 0.4, 0.9)], { matched: [['left', 'right']] }),
    );
    expect(clashes(graph)).toEqual([]);
    expectMatched(graph, 'left', [1, 0]);
  });

  test('two pairs at once, and the pairs of a hexagon', () => {
    const graph = buildPlanarGraph(
      drawing([circle(0, 0.5, 0.2), circle(0.3, 1, 0.1)], {
        matched: [
          ['left', 'right'],
          ['top', 'bottom'],
        ],
      }),
    );
    expectMatched(graph, 'left', [1, 0]);
    expectMatched(graph, 'top', [0, -1]);
    const corners = [0, 1, 2, 3, 4, 5].map((k) => polar(0, 0, 60 * k, 1));
    const hexagon = buildPlanarGraph({
      outline: polygon(...corners),
      background: 'air',
      regions: [{ name: 'disc', shape: circle(0.75, 0.433, 0.2) }],
      matched: [
        ['edge 1', 'edge 4'],
        ['edge 2', 'edge 5'],
        ['edge 3', 'edge 6'],
      ],
    });
    for (const k of [0, 1, 2]) {
      const out = polar(0, 0, 60 * k + 30, -Math.sqrt(3));
      expectMatched(hexagon, `edge ${k + 1}`, out);
    }
  });
});

describe('faults', () => {
  const one = (shape: Shape, more: Partial<Section> = {}): Section => drawing([shape], more);
  test.each<[string, Section]>([
    ['not-finite', one(rectangle(0.1, 0.1, Number.NaN, 0.5))],
    ['not-finite', one(circle(0.5, Number.POSITIVE_INFINITY, 0.1))],
    ['too-few-corners', one(polygon())],
    ['no-area', one(rectangle(0.1, 0.1, 0.1, 0.5))],
    ['no-area', one(circle(0.5, 0.5, 0))],
    ['no-area', one(circle(0.5, 0.5, -0.1))],
    ['no-area', one(polygon([0, 0.5], [0.3, 0.5], [0.9, 0.5]))],
    ['too-few-corners', one(polygon([0.1, 0.1], [0.5, 0.6]))],
    ['outline-crosses-itself', one(polygon([0.1, 0.1], [0.5, 0.5], [0.5, 0.1], [0.1, 0.5]))],
    ['outline-crosses-itself', one(polygon([0.1, 0.1], [0.5, 0.1], [0.5, 0.5], [0.3, 0.1], [0.1, 0.5]))],
    ['outline-crosses-itself', one(polygon([0.1, 0.1], [0.5, 0.1], [0.5, 0.5], [0.5, 0.3]))],
    ['coincident-corners', one(polygon([0.1, 0.1], [0.5, 0.1], [0.5, 0.1], [0.5, 0.5]))],
    ['no-area', one(polygon([0.1, 0.1], [0.5, 0.3], [0.3, 0.2]))],
    ['out-of-range', drawing([], { outline: rectangle(0, 0, 9e-11, 9e-11) })],
    ['out-of-range', drawing([], { outline: rectangle(0, 0, 2e10, 1) })],
    ['out-of-range', drawing([], { outline: rectangle(1e6, 0, 1e6 + 1, 1) })],
    ['out-of-range', one(rectangle(0.1, 0.1, 1e6, 0.5))],
    ['outside-outline', one(rectangle(1.1, 0, 1.5, 0.5))],
    ['outside-outline', one(circle(0.5, -0.2, 0.2))],
    ['name-twice', { ...one(circle(0.5, 0.5, 0.2)), background: 'r0' }],
    ['bad-edge-length', one(circle(0.5, 0.5, 0.2), { maxEdge: 0 })],
    [
      'bad-edge-length',
      { ...one(circle(0.5, 0.5, 0.2)), regions: [{ name: 'r', shape: circle(0.5, 0.5, 0.2), maxEdge: -1 }] },
    ],
    ['bad-edge-length', one(circle(0.5, 0.5, 0.2), { maxEdge: Number.NaN })],
    ['not-matching', one(circle(0.5, 0.5, 0.2), { matched: [['left', 'bottom']] })],
    ['not-matching', one(circle(0.5, 0.5, 0.2), { matched: [['left', 'wall']] })],
    ['not-matching', one(circle(0.1, 0.1, 0.1), { outline: circle(0, 0, 1), matched: [['rim', 'rim2']] })],
    ['matched-twice', one(circle(0.5, 0.5, 0.2), { matched: [['left', 'left']] })],
    [
      'matched-twice',
      one(circle(0.5, 0.5, 0.2), {
        matched: [
          ['left', 'right'],
          ['right', 'left'],
        ],
      }),
    ],
  ])('%s', (code, section) => {
    expect(faultCodes(() => buildPlanarGraph(section))).toContain(code);
  });

  test('unequal opposite sides cannot be matched', () => {
    const outline = polygon([0, 0], [4, 0], [3, 1], [0, 1]);
    const section: Section = { outline, background: 'air', regions: [], matched: [['edge 1', 'edge 3']] };
    expect(faultCodes(() => buildPlanarGraph(section))).toEqual(['not-matching']);
  });

  test('an outline without area is refused as the regions are', () => {
    expect(faultCodes(() => buildPlanarGraph(drawing([], { outline: rectangle(0, 0, 0, 1) })))).toEqual(['no-area']);
  });

  test('all faults of a drawing are told at once, by the names of the regions', () => {
    const section = drawing([circle(0.5, 0.5, 0), rectangle(3, 3, 4, 4), polygon([0.1, 0.1], [0.2, 0.3])]);
    expect(faultCodes(() => buildPlanarGraph(section))).toEqual(['no-area', 'too-few-corners', 'outside-outline']);
    expect(() => buildPlanarGraph(section)).toThrow(
      /regions.r0.shape: has no area; .*\nregions.r2.shape: has 2 corners; .*\nregions.r1.shape: lies outside/,
    );
  });
});

describe('faults name their place', () => {
  test('of coincident corners, the numbers and the point', () => {
    const twin = polygon([0.1, 0.1], [0.5, 0.1], [0.5, 0.5], [0.5, 0.5]);
    expect(() => buildPlanarGraph(drawing([twin]))).toThrow(
      'regions.r0.shape: corners 3 and 4 are the same point, (0.5, 0.5) m; leave one of them out',
    );
  });

  test('of a crossing, the sides and the point', () => {
    const bow = polygon([0.1, 0.1], [0.5, 0.5], [0.5, 0.1], [0.1, 0.5]);
    expect(() => buildPlanarGraph(drawing([bow]))).toThrow(/near \(0\.3\d*, 0\.3\d*\) m, sides 1 and 3;/);
    const spike = polygon([0.1, 0.1], [0.5, 0.1], [0.5, 0.5], [0.5, 0.3]);
    expect(() => buildPlanarGraph(drawing([spike]))).toThrow('runs back on itself at corner 3, (0.5, 0.5) m');
  });

  test('of crossings of many corners, found without comparing all with all', () => {
    const round = Array.from({ length: 50_000 }, (_, k) => polar(0.5, 0.5, (360 * k) / 50_000, 0.4));
    [round[20_000], round[20_001]] = [round[20_001], round[20_000]];
    const codes = faultCodes(() => buildPlanarGraph(drawing([{ kind: 'polygon', corners: round }])));
    expect(codes).toEqual(['outline-crosses-itself']);
  });
});

describe('limits', () => {
  const round = (count: number): Shape => ({
    kind: 'polygon',
    corners: Array.from({ length: count }, (_, k) => polar(0.5, 0.5, (360 * k) / count, 0.4)),
  });

  test('a million corners are refused, in one shape or in many', () => {
    expect(() => buildPlanarGraph(drawing([round(1_000_000)]))).toThrow(
      'regions.r0.shape: has 1000000 corners, more than the 200000 that are drawn; leave some out',
    );
    const many = Array.from({ length: 12_501 }, (_, i) => circle(0.5, 0.5, 0.1 + 1e-6 * i));
    expect(faultCodes(() => buildPlanarGraph(drawing(many)))).toEqual(['too-many-corners']);
  });

  test('fifty thousand corners are drawn', () => {
    expect(segmentCount(buildPlanarGraph(drawing([round(50_000)])))).toBe(50_004);
  });

  test('lines that meet in millions of points are refused', () => {
    const bars = Array.from({ length: 400 }, (_, i) => (i + 0.3) / 400).flatMap((x) => [
      rectangle(0.1, x, 0.9, x + 0.0005),
      rectangle(x, 0.1, x + 0.0005, 0.9),
    ]);
    expect(faultCodes(() => buildPlanarGraph(drawing(bars)))).toEqual(['too-entangled']);
  });
});

describe('chains of matched sides', () => {
  /** A strip whose left border is kinked, and whose right border is the same, 2 m to the right. */
  const kinks: readonly Point[] = [
    [0, 0],
    [0.3, 0.4],
    [-0.1, 0.7],
    [0, 1],
  ];
  const right = kinks.map(([x, y]): Point => [x + 2, y]);
  const strip = (left: readonly Point[]): Shape => polygon(...right, ...[...left].reverse());
  const matched = [
    [
      ['edge 1', 'edge 2', 'edge 3'],
      ['edge 5', 'edge 6', 'edge 7'],
    ],
  ] as const;

  test('correspond piece by piece, with the cuts of both', () => {
    const section = drawing([rectangle(0, 0.5, 0.5, 0.6), circle(2.2, 0.4, 0.25)], { outline: strip(kinks), matched });
    const graph = buildPlanarGraph(section);
    expectMatched(graph, 'edge 1', [-2, 0]);
    expectMatched(graph, 'edge 2', [-2, 0]);
    expectMatched(graph, 'edge 3', [-2, 0]);
    expect(clashes(graph)).toEqual([]);
    const backwards = [
      [
        ['edge 3', 'edge 2', 'edge 1'],
        ['edge 7', 'edge 6', 'edge 5'],
      ],
    ] as const;
    expect(buildPlanarGraph({ ...section, matched: backwards })).toEqual(graph);
  });

  test('a corner in the middle of a straight side has its counterpart made', () => {
    const outline = polygon([0, 0], [2, 0], [2, 0.3], [2, 1], [0, 1]);
    const graph = buildPlanarGraph(drawing([], { outline, matched: [[['edge 2', 'edge 3'], 'edge 5']] }));
    expect(holds(graph, 0, 0.3)).toBe(true);
    expectMatched(graph, 'edge 2', [-2, 0]);
    expectMatched(graph, 'edge 3', [-2, 0]);
  });

  test('that deviate are refused with the first corner that does', () => {
    const bent = kinks.map(([x, y], i): Point => (i === 2 ? [x + 0.01, y] : [x, y]));
    expect(() => buildPlanarGraph(drawing([], { outline: strip(bent), matched }))).toThrow(
      /edge 1 \+ edge 2 \+ edge 3, edge 5 .*corner 3 at \(1\.9, 0\.7\) m has nothing opposite, by 0\.0\d+ m/,
    );
  });

  test.each([
    [
      [
        ['edge 1', 'edge 3'],
        ['edge 5', 'edge 7'],
      ],
      /are not sides that follow each other/,
    ],
    [
      [
        ['edge 1', 'edge 9'],
        ['edge 5', 'edge 6'],
      ],
      /name no side 'edge 9'/,
    ],
    [[['edge 1', 'edge 2'], 'edge 5'], /are not sides of equal length and direction/],
  ] as const)('%j is refused', (pair, message) => {
    const section = drawing([], { outline: strip(kinks), matched: [pair] as Section['matched'] & object });
    expect(() => buildPlanarGraph(section)).toThrow(message);
  });
});

describe('shapes', () => {
  test('sides are named in order round the outline', () => {
    expect(sidesOf(rectangle(0, 0, 1, 1))).toEqual(['bottom', 'right', 'top', 'left']);
    expect(sidesOf(polygon([0, 0], [1, 0], [0, 1]))).toEqual(['edge 1', 'edge 2', 'edge 3']);
    expect(sidesOf(circle(0, 0, 1))).toEqual(['rim']);
  });

  test('a polygon may repeat its first corner at the end, and has the same sides', () => {
    const open = polygon([0, 0], [1, 0], [1.2, 1], [0, 1]);
    const closed = polygon([0, 0], [1, 0], [1.2, 1], [0, 1], [1e-17, 0]);
    expect(sidesOf(closed)).toEqual(sidesOf(open));
    const graphs = [open, closed].map((outline) => buildPlanarGraph(drawing([circle(0.5, 0.5, 0.2)], { outline })));
    expect(graphs[1].segments).toEqual(graphs[0].segments);
    expect(graphs[1].segmentToSide).toEqual(graphs[0].segmentToSide);
  });

  test('a rectangle may be given by any two opposite corners', () => {
    const graphs = [rectangle(0.2, 0.3, 0.6, 0.9), rectangle(0.6, 0.9, 0.2, 0.3), rectangle(0.6, 0.3, 0.2, 0.9)].map(
      (shape) => buildPlanarGraph(drawing([shape])),
    );
    expect(graphs[1].points).toEqual(graphs[0].points);
    expect(graphs[2].points).toEqual(graphs[0].points);
  });

  test('the bounds of a shape hold it, and a point of it lies in it', () => {
    const shapes = fc.oneof(rectangles, polygons);
    const unit = fc.double({ min: -0.5, max: 2, noNaN: true });
    fc.assert(
      fc.property(shapes, unit, unit, (shape, x, y) => {
        const box = boundsOf(shape);
        if (contains(shape, x, y)) expect(x >= box.x0 && x <= box.x1 && y >= box.y0 && y <= box.y1).toBe(true);
      }),
      { seed: 32, numRuns: 500 },
    );
    const arrow = polygon([0, 0], [2, 0], [1, 0.5], [2, 2]);
    expect(contains(arrow, 0.9, 0.4)).toBe(true);
    expect(contains(arrow, 1.5, 0.5)).toBe(false);
    expect(contains(circle(1, 1, 0.5), 1.3, 1.3)).toBe(true);
    expect(contains(circle(1, 1, 0.5), 1.4, 1.4)).toBe(false);
  });
});
