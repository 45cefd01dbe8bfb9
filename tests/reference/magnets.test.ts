import type { AdaptiveSolution, Field, Goal, Material, Point, Region, Section, Setup } from '@gapwright/fem-core';
import { solveAdaptively, weightedFlux, weightedIntegral } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { check } from './table.js';

const air: Material = { kind: 'linear', muR: 1 };
const SHEETS = 'equivalent current sheets on its sides (any electromagnetics text, calculated)';

const box = (name: string, x: number, y: number, width: number, height: number): Region => ({
  name,
  shape: { kind: 'rectangle', from: [x, y], to: [x + width, y + height] },
});

/** Each component of B is harmonic in air and where recoil is 1: its mean over a disc is its value at the centre. */
const PROBE = 0.001;
const probeAt = (centre: Point, i: number): Region => ({
  name: `probe ${i}`,
  shape: { kind: 'circle', centre, radius: PROBE },
  maxEdge: PROBE / 4,
});
const probeGoals = (points: readonly Point[]): Goal[] =>
  points.flatMap((_, i) =>
    ([[1, 0] as const, [0, 1] as const] as const).map(([x, y]): Goal => {
      const area = Math.PI * PROBE ** 2;
      return {
        name: `probe ${i}, ${x === 1 ? 'Bx' : 'By'}`,
        functional: ({ mesh }) => weightedFlux(mesh, [`probe ${i}`], () => [x / area, y / area]),
      };
    }),
  );

function solveProbes(section: Section, setup: Setup, points: readonly Point[], scale: number): AdaptiveSolution {
  const goals = probeGoals(points);
  const solution = solveAdaptively(section, setup, {
    goals,
    weights: () => goals.map(() => 1 / scale),
    accuracy: 5e-3,
  });
  expect(solution.accurate).toBe(true);
  return solution;
}

const [WIDTH, HEIGHT, REMANENCE] = [0.03, 0.01, 1.25];

/** A of a magnet about the origin, Br along +y, recoil 1: sheets of Br/mu0 up its left side and down its right one. */
function magnetPotential(x: number, y: number): number {
  const sheet = (u: number): number => {
    const part = (v: number): number => v * Math.log(u * u + v * v) + 2 * Math.abs(u) * Math.atan2(v, Math.abs(u));
    return (-REMANENCE / (4 * Math.PI)) * (part(y + HEIGHT / 2) - part(y - HEIGHT / 2));
  };
  return sheet(x + WIDTH / 2) - sheet(x - WIDTH / 2);
}

const magnet: Material = { kind: 'magnet', recoil: 1, remanence: [0, REMANENCE] };

describe('rectangular magnet in air, exact potential on the outline', () => {
  const points = [
    [0, 0, 0, 0.256040956],
    [0, 0.01, 0, 0.184479522],
    [0, 0.015, 0, 0.135000242],
    [0.015, 0.01, 0.199090897, 0.0593844756],
    [0.02, 0.012, 0.126601221, -0.0158040345],
    [0.025, 0, 0, -0.135000242],
  ] as const;
  const places = points.map(([x, y]): Point => [x, y]);
  const side = { kind: 'potential', value: magnetPotential } as const;
  const probes = Object.fromEntries(points.map((_, i) => [`probe ${i}`, i === 0 ? magnet : air]));
  const solution = solveProbes(
    {
      outline: { kind: 'rectangle', from: [-0.04, -0.03], to: [0.04, 0.03] },
      background: 'air',
      maxEdge: 0.01,
      regions: [box('magnet', -WIDTH / 2, -HEIGHT / 2, WIDTH, HEIGHT), ...places.map(probeAt)],
    },
    { materials: { magnet, air, ...probes }, edges: { left: side, right: side, top: side, bottom: side } },
    places,
    0.256040956,
  );

  test.each(points)('B at (%s, %s) m', (x, y, bx, by) => {
    const i = 2 * points.findIndex(([px, py]) => px === x && py === y);
    const given = { case: 'magnet 30 x 10 mm, 1.25 T, in air', source: SHEETS, scale: 0.256040956 };
    const where = `at (${1000 * x}, ${1000 * y}) mm`;
    const { values, bounds } = solution;
    check({ ...given, quantity: `Bx ${where}`, expected: bx, got: values[i], bound: bounds[i] }, 1e-3);
    check({ ...given, quantity: `By ${where}`, expected: by, got: values[i + 1], bound: bounds[i + 1] }, 1e-3);
  });
});

test('two such magnets facing at 12 mm, no iron: By on the mid-plane', () => {
  const shift = (0.012 + HEIGHT) / 2;
  const value = (x: number, y: number): number => magnetPotential(x, y - shift) + magnetPotential(x, y + shift);
  const side = { kind: 'potential', value } as const;
  const expected = [0.3478639, 0.288715668, 0.116406628, -0.0528607895];
  const places = [0, 0.01, 0.015, 0.02].map((x): Point => [x, 0]);
  const probes = Object.fromEntries(places.map((_, i) => [`probe ${i}`, air]));
  const { values, bounds } = solveProbes(
    {
      outline: { kind: 'rectangle', from: [-0.04, -0.03], to: [0.04, 0.03] },
      background: 'air',
      maxEdge: 0.01,
      regions: [
        box('upper', -WIDTH / 2, shift - HEIGHT / 2, WIDTH, HEIGHT),
        box('lower', -WIDTH / 2, -shift - HEIGHT / 2, WIDTH, HEIGHT),
        ...places.map(probeAt),
      ],
    },
    {
      materials: { upper: magnet, lower: magnet, air, ...probes },
      edges: { left: side, right: side, top: side, bottom: side },
    },
    places,
    expected[0],
  );
  expected.forEach((by, i) => {
    const given = { case: 'two magnets facing at 12 mm', source: SHEETS, scale: expected[0] };
    const [got, bound] = [values[2 * i + 1], bounds[2 * i + 1]];
    check({ ...given, quantity: `By at x = ${1000 * places[i][0]} mm`, expected: by, got, bound }, 1e-3);
  });
});

test('one magnet pair between infinite iron plates: By at the centre', () => {
  // The plates are the natural condition, and so are the far sides, which hold both plates at one scalar potential; the
  // stray field falls as exp(-pi x/32 mm), so 150 mm to the side is far.
  const iron = { kind: 'crossing' } as const;
  const gap = 0.012;
  const [far, high] = [0.15, gap / 2 + HEIGHT];
  const { values, bounds } = solveProbes(
    {
      outline: { kind: 'rectangle', from: [-far, -high], to: [far, high] },
      background: 'air',
      maxEdge: 0.02,
      regions: [
        box('upper', -WIDTH / 2, gap / 2, WIDTH, HEIGHT),
        box('lower', -WIDTH / 2, -high, WIDTH, HEIGHT),
        probeAt([0, 0], 0),
      ],
    },
    {
      materials: { upper: magnet, lower: magnet, air, 'probe 0': air },
      edges: { top: iron, bottom: iron, left: iron, right: iron },
    },
    [[0, 0]],
    0.741824569,
  );
  const source = 'Fourier series of the images in the plates, checked against 40 000 of them (calculated)';
  const given = { case: 'magnet pair between iron plates', quantity: 'By at the centre', source };
  check({ ...given, expected: 0.741824569, got: values[1], bound: bounds[1] }, 1e-3);
});

describe('planar Halbach array of four blocks a wave, 80 mm long and 20 mm thick, 1.2 T', () => {
  const source =
    'Br sin(n pi/4)/(n pi/4) (1 - exp(-n k d)) exp(-n k y) (Mallinson, IEEE Trans. Magn. 9, 1973; Halbach, Nucl. Instrum. Methods 169, 1980; titles from memory), confirmed by summing 3200 blocks';
  const [wave, thickness, remanence, half] = [0.08, 0.02, 1.2, 0.001];
  const blocks = [0, 1, 2, 3];
  /** Turned by 90 degrees from block to block so that the strong side is above. */
  const materials = Object.fromEntries(
    blocks.map((i): [string, Material] => {
      const angle = (Math.PI / 2) * (1 + i);
      return [
        `block ${i}`,
        { kind: 'magnet', recoil: 1, remanence: [remanence * Math.cos(angle), remanence * Math.sin(angle)] },
      ];
    }),
  );
  const section: Section = {
    outline: { kind: 'rectangle', from: [0, -1.5 * wave], to: [wave, 1.5 * wave] },
    background: 'air',
    maxEdge: wave / 6,
    matched: [['left', 'right']],
    regions: [
      ...blocks.map((i) => box(`block ${i}`, (i * wave) / 4, -thickness / 2, wave / 4, thickness)),
      // layers about 5 mm off either face
      box('above', 0, thickness / 2 + 0.005 - half, wave, 2 * half),
      box('below', 0, -thickness / 2 - 0.005 - half, wave, 2 * half),
    ],
  };
  const wanted = [
    ['above', 1, 0.577857206],
    ['above', 5, 0.0303181372],
    ['above', 3, 0],
    ['above', 7, 0],
    ['below', 3, 0.109874005],
    ['below', 7, 0.0098773793],
    ['below', 1, 0],
    ['below', 5, 0],
  ] as const;
  /** Two goals a harmonic, sine and cosine of A: By_n = n k A_n; the mean over the layer is sinh(n k t)/(n k t) of it. */
  const goals = wanted.flatMap(([layer, n]) =>
    [Math.sin, Math.cos].map((shape): Goal => {
      const k = (2 * Math.PI * n) / wave;
      const factor = ((2 * k) / (wave * 2 * half)) * ((k * half) / Math.sinh(k * half));
      return {
        name: `${layer}, order ${n}`,
        functional: ({ mesh }: Field) => weightedIntegral(mesh, [layer], (x) => factor * shape(k * x)),
      };
    }),
  );
  const { values, bounds, accurate } = solveAdaptively(
    section,
    {
      materials: { air, above: air, below: air, ...materials },
      edges: { left: { kind: 'repeating' }, right: { kind: 'repeating' } },
    },
    { goals, weights: () => goals.map(() => 1 / 0.577857206), accuracy: 5e-3 },
  );

  test.each(wanted)('%s, order %i', (layer, n, expected) => {
    expect(accurate).toBe(true);
    const i = 2 * wanted.findIndex(([l, order]) => l === layer && order === n);
    const got = Math.hypot(values[i], values[i + 1]);
    const bound = Math.hypot(bounds[i], bounds[i + 1]);
    const given = { case: 'Halbach array of four blocks a wave', source, scale: 0.577857206 };
    check({ ...given, quantity: `B_${n} 5 mm ${layer}`, expected, got, bound }, 1e-3, 1e-6);
  });
});
