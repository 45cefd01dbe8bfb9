import type { EdgeCondition, Fault, Point, Section, Setup } from '@gapwright/fem-core';
import { InputError } from '@gapwright/fem-core';
import { numberUnknowns } from '@gapwright/fem-core/equations';
import { checkMesh, cornerCount, meshSection, nodeCount, nodePoint, solveOnMesh } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { AIR } from '../../laws/sections.js';
import { doubleUp, largest, naturalSides, sources, tile, withEdges } from './tile.js';

const mesh = meshSection(tile);
const nodes = nodeCount(mesh);
const [width, height] = [0.06, 0.04];

/** The tile without its current: sides that hold nothing need no return. */
const still: Setup = { ...sources, currentDensity: {} };

/** Numbers of the nodes at places that satisfy the condition. */
const nodesWhere = (is: (x: number, y: number) => boolean, of = mesh): number[] =>
  Array.from({ length: nodeCount(of) }, (_, node) => node).filter((node) => is(...nodePoint(of, node)));
const near = (a: number, b: number): boolean => Math.abs(a - b) < 1e-9;
const onOutline = (x: number, y: number): boolean => near(x, 0) || near(x, width) || near(y, 0) || near(y, height);

const faultsOf = (setup: Setup, of = mesh): readonly Fault[] => {
  try {
    numberUnknowns(of, setup);
  } catch (error) {
    if (error instanceof InputError) return error.faults;
    throw error;
  }
  return [];
};

test('every number of an unknown is used, and what is fixed has none', () => {
  for (const edges of [{}, naturalSides, { left: { kind: 'reversing' }, right: { kind: 'reversing' } }] as const) {
    const { count, unknownOf, sign, fixed } = numberUnknowns(mesh, withEdges(edges, still));
    const used = new Set(unknownOf.filter((i) => i >= 0));
    expect([...used].sort((a, b) => a - b)).toEqual(Array.from({ length: count }, (_, i) => i));
    unknownOf.forEach((i, node) => {
      expect(Math.abs(sign[node])).toBe(i < 0 ? 0 : 1);
      if (i >= 0) expect(fixed[node]).toBe(0);
    });
  }
});

test('sides that are not named are closed: A = 0 on the whole outline and nowhere else', () => {
  const { unknownOf, fixed } = numberUnknowns(mesh, sources);
  const outline = new Set(nodesWhere(onOutline));
  unknownOf.forEach((i, node) => {
    expect(i < 0).toBe(outline.has(node));
    expect(fixed[node]).toBe(0);
  });
});

test('applied and potential sides hold their values at corners and middles of edges', () => {
  const edges: Record<string, EdgeCondition> = {
    ...naturalSides,
    bottom: { kind: 'applied', field: [0.3, -0.8] },
    top: { kind: 'potential', value: (x, y) => Math.sin(50 * x) + y },
  };
  const { unknownOf, fixed } = numberUnknowns(mesh, withEdges(edges));
  for (let node = 0; node < nodes; node++) {
    const [x, y] = nodePoint(mesh, node);
    const held = near(y, 0) ? 0.3 * y + 0.8 * x : near(y, height) ? Math.sin(50 * x) + y : undefined;
    expect(unknownOf[node] < 0).toBe(held !== undefined);
    expect(fixed[node]).toBeCloseTo(held ?? 0, 15);
  }
});

describe('matched sides', () => {
  test.each([
    ['repeating', 1],
    ['reversing', -1],
  ] as const)('nodes of %s sides share an unknown, with sign %i', (kind, sign) => {
    const edges: Record<string, EdgeCondition> = { left: { kind }, right: { kind }, bottom: { kind: 'crossing' } };
    const unknowns = numberUnknowns(mesh, withEdges(edges));
    const at = nodesWhere((x, y) => near(x, 0) && !near(y, height));
    expect(at.length).toBeGreaterThan(4);
    for (const node of at) {
      const [, y] = nodePoint(mesh, node);
      const [mate] = nodesWhere((x, other) => near(x, width) && near(y, other));
      expect(unknowns.unknownOf[mate]).toBe(unknowns.unknownOf[node]);
      expect(unknowns.sign[mate] * unknowns.sign[node]).toBe(sign);
    }
  });

  test('held values pass to the matched node with their sign: A(0) = -A(width) at both corners of reversing sides', () => {
    const wave = (x: number): number => Math.cos((Math.PI * x) / width);
    for (const maxEdge of [0.03, 0.02, 0.015, 0.012]) {
      const cells = meshSection({ ...tile, maxEdge });
      const edges: Record<string, EdgeCondition> = {
        left: { kind: 'reversing' },
        right: { kind: 'reversing' },
        bottom: { kind: 'potential', value: (x) => 0.3 * wave(x) },
        top: { kind: 'potential', value: (x) => -0.7 * wave(x) },
      };
      const { fixed } = numberUnknowns(cells, withEdges(edges));
      for (const node of nodesWhere((_, y) => near(y, 0) || near(y, height), cells)) {
        const [x, y] = nodePoint(cells, node);
        expect(fixed[node]).toBeCloseTo((near(y, 0) ? 0.3 : -0.7) * wave(x), 12);
      }
    }
  });

  test('both pairs repeating: the four corners are one node, and that or another is pinned', () => {
    const edges = Object.fromEntries(mesh.sideNames.map((side) => [side, { kind: 'repeating' } as const]));
    const unknowns = numberUnknowns(mesh, withEdges(edges, { materials: sources.materials }));
    const corners = nodesWhere((x, y) => (near(x, 0) || near(x, width)) && (near(y, 0) || near(y, height)));
    expect(corners).toHaveLength(4);
    expect(new Set(corners.map((node) => unknowns.unknownOf[node])).size).toBe(1);
    const outline = nodesWhere(onOutline).length;
    expect(unknowns.count).toBe(nodes - outline + (outline - 4) / 2 + 1 - 1);
  });

  test('a node tied to its own negative is zero: the corners of a hexagon with all sides reversing', () => {
    const corners = Array.from({ length: 6 }, (_, i): Point => {
      const angle = (Math.PI * i) / 3;
      return [Math.cos(angle), Math.sin(angle)];
    });
    const hexagon: Section = {
      outline: { kind: 'polygon', corners },
      background: 'air',
      maxEdge: 0.6,
      regions: [],
      matched: [
        ['edge 1', 'edge 4'],
        ['edge 2', 'edge 5'],
        ['edge 3', 'edge 6'],
      ],
    };
    const cells = meshSection(hexagon);
    const conditions = (kind: 'reversing' | 'repeating'): Setup => ({
      materials: { air: AIR },
      edges: Object.fromEntries(cells.sideNames.map((side) => [side, { kind }])),
    });
    // Going once round through three sides comes back with the sign (-1)^3 (edge 1 to 4, 2 to 5, 3 to 6).
    const at = nodesWhere((x, y) => near(Math.hypot(x, y), 1), cells);
    expect(at).toHaveLength(6);
    const reversing = numberUnknowns(cells, conditions('reversing'));
    for (const node of at) {
      expect([reversing.unknownOf[node], reversing.sign[node]]).toEqual([-1, 0]);
      expect(Math.abs(reversing.fixed[node])).toBe(0);
    }
    expect(Array.from(reversing.unknownOf).filter((i) => i < 0)).toHaveLength(6);
    // Repeating ties them without a sign; two triples, one of which may be pinned.
    const repeating = numberUnknowns(cells, conditions('repeating'));
    expect(new Set(at.map((node) => repeating.unknownOf[node])).size).toBe(2);
  });
});

describe('where nothing fixes the potential', () => {
  test('natural sides alone: one node is pinned to 0', () => {
    const { count, unknownOf, fixed } = numberUnknowns(mesh, withEdges(naturalSides, still));
    expect(count).toBe(nodes - 1);
    expect(unknownOf.filter((i) => i < 0)).toHaveLength(1);
    expect(largest(fixed)).toBe(0);
  });

  test('a closed, an applied or a reversing side leaves nothing to pin', () => {
    const reversing = { ...naturalSides, left: { kind: 'reversing' }, right: { kind: 'reversing' } } as const;
    const sideNodes = nodesWhere((x) => near(x, 0)).length;
    expect(numberUnknowns(mesh, withEdges(reversing, still)).count).toBe(nodes - sideNodes);
    const applied = { ...naturalSides, left: { kind: 'applied', field: [0, 0] } } as const;
    expect(numberUnknowns(mesh, withEdges(applied, still)).count).toBe(nodes - sideNodes);
    expect(numberUnknowns(mesh, withEdges({ ...naturalSides, left: { kind: 'closed' } }, still)).count).toBe(
      nodes - sideNodes,
    );
  });

  test('the field does not hang on the pin: it equals that of one side held at a value of its own', () => {
    // Flux crosses all sides but one pair: holding top and bottom anywhere in between changes only the constant of A.
    const strip: Section = { ...tile, regions: [tile.regions[1]] };
    const cells = meshSection(strip);
    const setup: Setup = { materials: { air: AIR, magnet: sources.materials.magnet } };
    const pinned = solveOnMesh(cells, { ...setup, edges: naturalSides }, { tolerance: 1e-13 });
    expect(pinned.field.report.converged).toBe(true);
    const [node] = nodesWhere((x, y) => near(x, 0) && near(y, 0), cells);
    const { potential } = pinned.field;
    // Giving the outline the potential found there must find the same inside, whatever constant is added.
    const given = (x: number, y: number): number => {
      const [at] = nodesWhere((px, py) => near(px, x) && near(py, y), cells);
      return potential[at] - potential[node] + 0.25;
    };
    const edges = Object.fromEntries(
      cells.sideNames.map((side) => [side, { kind: 'potential', value: given } as const]),
    );
    const held = solveOnMesh(cells, { ...setup, edges }, { tolerance: 1e-13 }).field;
    const shift = held.potential[node] - potential[node];
    expect(largest(held.potential.map((a, i) => a - potential[i] - shift))).toBeLessThan(1e-12 * largest(potential));
  });

  test('currents that sum to zero are taken, others refused with their sum', () => {
    const half = { ...tile, regions: [...tile.regions.slice(0, 2), back(0.002), back(0.032)] };
    const cells = meshSection(half);
    const materials = { ...sources.materials, 'back 0.002': AIR, 'back 0.032': AIR };
    const carry = (first: number, second: number): Setup =>
      withEdges(naturalSides, { materials, currentDensity: { 'back 0.002': first, 'back 0.032': second } });
    expect(faultsOf(carry(3e6, -3e6), cells)).toEqual([]);
    const [fault] = faultsOf(carry(3e6, -2e6), cells);
    expect(fault.code).toBe('no-return');
    const sum = Number(/sum to ([-\d.e+]+) A/.exec(fault.wrong)?.[1]);
    expect(sum).toBeCloseTo(1e6 * 0.02 * 0.005, 6);
    // In a round bar too: its rim is met to the fourth order of the edges, so the sum is not exact.
    const round = meshSection({ ...tile, regions: [...tile.regions, back(0.005)] });
    const bar = 2e6;
    const setup = (share: number): Setup =>
      withEdges(naturalSides, {
        materials: { ...sources.materials, 'back 0.005': AIR },
        currentDensity: { bar, 'back 0.005': (-share * bar * Math.PI * 0.007 ** 2) / (0.02 * 0.005) },
      });
    expect(faultsOf(setup(1), round)).toEqual([]);
    expect(faultsOf(setup(0.99), round)).toMatchObject([{ code: 'no-return' }]);
    // With a closed side the current may return outside.
    expect(faultsOf({ ...carry(3e6, 0), edges: { ...naturalSides, top: { kind: 'closed' } } }, cells)).toEqual([]);
  });
});

function back(x: number): Section['regions'][number] {
  return { name: `back ${x}`, shape: { kind: 'rectangle', from: [x, 0.03], to: [x + 0.02, 0.035] } };
}

describe('conditions that cannot be are refused', () => {
  test('a side that does not exist, with those that do', () => {
    const [fault] = faultsOf(withEdges({ west: { kind: 'crossing' } }));
    expect(fault).toMatchObject({ code: 'unknown-side', key: 'edges.west' });
    for (const side of ['left', 'right', 'bottom', 'top']) expect(fault.remedy).toContain(side);
  });

  test('a side that repeats or reverses without a match', () => {
    const { matched: _, ...alone } = tile;
    for (const kind of ['repeating', 'reversing'] as const) {
      const [fault] = faultsOf(withEdges({ left: { kind }, right: { kind } }), meshSection(alone));
      expect(fault).toMatchObject({ code: 'no-match' });
      expect(fault.key).toMatch(/^edges\.(left|right)$/);
    }
  });

  test.each<readonly [string, Readonly<Record<string, EdgeCondition>>]>([
    ['closed', { left: { kind: 'repeating' } }],
    ['crossing', { left: { kind: 'repeating' }, right: { kind: 'crossing' } }],
    ['reversing', { left: { kind: 'repeating' }, right: { kind: 'reversing' } }],
  ])('one side repeating and its match %s', (_, edges) => {
    const [fault] = faultsOf(withEdges(edges));
    expect(fault.code).toBe('one-sided');
    expect(fault.remedy).toMatch(/both sides/);
  });

  test('several faults are told at once', () => {
    const codes = faultsOf(
      withEdges({ east: { kind: 'closed' }, west: { kind: 'closed' }, left: { kind: 'reversing' } }),
    );
    expect(codes.map(({ code }) => code)).toEqual(['unknown-side', 'unknown-side', 'one-sided']);
  });
});

describe('sides that hold different values at one place are refused', () => {
  const potential = (value: number): EdgeCondition => ({ kind: 'potential', value: () => value });

  test('two potentials that part at their corner, with both sides and values', () => {
    const [fault, ...more] = faultsOf(withEdges({ ...naturalSides, left: potential(0.3), top: potential(0.2) }));
    expect(more).toEqual([]);
    expect(fault.code).toBe('contradictory-edges');
    expect(`${fault.key} ${fault.wrong}`).toMatch(/edges\.(left|top) .*edges\.(left|top)/);
    for (const text of ['0.3 Wb/m', '0.2 Wb/m', '(0, 0.04)']) expect(fault.wrong).toContain(text);
  });

  test('a closed side, named or not, beside one that holds another value', () => {
    const applied = { kind: 'applied', field: [0.5, 0] } as const; // A = 0.5 y
    expect(faultsOf(withEdges({ left: applied, right: applied })).map(({ code }) => code)).toEqual([
      'contradictory-edges',
      'contradictory-edges',
    ]);
    // The bottom is closed where the applied field has A = 0: that agrees.
    expect(faultsOf(withEdges({ left: applied, right: applied, top: { kind: 'crossing' } }))).toEqual([]);
  });

  test('not the same applied field on sides that meet, nor what differs by rounding alone', () => {
    const applied: EdgeCondition = { kind: 'applied', field: [0.3, -0.7] };
    expect(faultsOf(withEdges(Object.fromEntries(mesh.sideNames.map((side) => [side, applied]))))).toEqual([]);
    const close = { ...naturalSides, left: potential(0.3), top: potential(0.3 * (1 + 1e-12)) };
    expect(faultsOf(withEdges(close))).toEqual([]);
    expect(faultsOf(withEdges({ ...close, top: potential(0.3 * (1 + 1e-8)) }))).toHaveLength(1);
  });

  test('repeating sides cannot tie two values, nor reversing sides what is not opposite', () => {
    for (const [kind, right] of [
      ['repeating', 1],
      ['reversing', -1],
    ] as const) {
      const tied = (value: (x: number) => number): Setup =>
        withEdges({ left: { kind }, right: { kind }, top: { kind: 'crossing' }, bottom: { kind: 'potential', value } });
      expect(faultsOf(tied((x) => 0.1 + ((right - 1) * 0.1 * x) / width))).toEqual([]);
      const [fault] = faultsOf(tied((x) => 0.1 + (0.3 * x) / width));
      expect(fault).toMatchObject({ code: 'contradictory-edges', key: 'edges.bottom' });
      expect(fault.wrong).toContain('0.1 Wb/m at (0, 0)');
    }
  });

  test('a node tied to its own negative cannot hold anything but 0', () => {
    const lone = meshSection({ ...tile, regions: [] });
    const reversing = Object.fromEntries(lone.sideNames.map((side) => [side, { kind: 'reversing' } as const]));
    expect(faultsOf({ materials: sources.materials, edges: reversing }, lone)).toEqual([]);
  });

  test('in linear elements too, and values that are no numbers in either', () => {
    const setup = withEdges({ ...naturalSides, left: potential(0.3), top: potential(0.2) });
    expect(() => numberUnknowns(mesh, setup, 1)).toThrow(/edges\.(left|top) holds 0\.[23] Wb\/m/);
    const [fault, ...more] = faultsOf(withEdges({ left: potential(Number.NaN), top: { kind: 'crossing' } }));
    expect(fault).toMatchObject({ code: 'not-finite', key: 'edges.left' });
    expect(more).toEqual([]);
  });
});

describe('a section under matched sides is half of one twice as wide', () => {
  const { mesh: joined, copyOf } = doubleUp(mesh, width);
  const twice = (sign: 1 | -1): Setup => {
    const { magnet } = sources.materials;
    const [rx, ry] = magnet.kind === 'magnet' ? magnet.remanence : [0, 0];
    const primed = Object.fromEntries(Object.entries(sources.materials).map(([name, one]) => [`${name}'`, one]));
    return {
      materials: {
        ...sources.materials,
        ...primed,
        "magnet'": { kind: 'magnet', recoil: 1.08, remanence: [sign * rx, sign * ry] },
      },
      currentDensity: { bar: 2e6, "bar'": sign * 2e6 },
    };
  };

  test('the joined mesh keeps all promises of a mesh', () => {
    expect(() => checkMesh(joined)).not.toThrow();
    expect(cornerCount(joined)).toBeLessThan(2 * cornerCount(mesh));
  });

  test.each([
    ['repeating', 1, 'closed'],
    ['reversing', -1, 'closed'],
    ['reversing', -1, 'crossing'],
  ] as const)('%s sides (sources times %i in the copy), top and bottom %s', (kind, sign, other) => {
    const ends: Record<string, EdgeCondition> = { top: { kind: other }, bottom: { kind: other } };
    const options = { tolerance: 1e-12 };
    const half = solveOnMesh(mesh, withEdges({ ...ends, left: { kind }, right: { kind } }), options).field;
    // Two copies of either kind repeat.
    const whole = solveOnMesh(
      joined,
      withEdges({ ...ends, left: { kind: 'repeating' }, right: { kind: 'repeating' } }, twice(sign)),
      options,
    ).field;
    expect([half.report.converged, whole.report.converged]).toEqual([true, true]);
    // Where no side holds A, that of the whole is known but for a constant, which reversing takes away.
    const constant =
      kind === 'reversing' && other === 'crossing'
        ? half.potential.reduce(
            (sum, _, node) => sum + whole.potential[nodeOfFirst(node)] + whole.potential[copyOf[node]],
            0,
          ) /
          (2 * nodes)
        : 0;
    const scale = largest(half.potential);
    for (let node = 0; node < nodes; node++) {
      expect(Math.abs(whole.potential[nodeOfFirst(node)] - constant - half.potential[node])).toBeLessThan(
        1e-10 * scale,
      );
      expect(Math.abs(whole.potential[copyOf[node]] - constant - sign * half.potential[node])).toBeLessThan(
        1e-10 * scale,
      );
    }
    expect(largest(half.potential)).toBeGreaterThan(1e-4);
  });

  /** Corners of the first keep their numbers; its edges do, behind more corners. */
  function nodeOfFirst(node: number): number {
    return node < cornerCount(mesh) ? node : node - cornerCount(mesh) + cornerCount(joined);
  }
});
