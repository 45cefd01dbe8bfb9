import type { Machine } from '@gapwright/machine-models';
import { describeMachine, readMachine, solveSlice } from '@gapwright/machine-models';
import { beforeAll, describe, expect, test } from 'vitest';

/**
 * What common practice expects of magnets between the poles and of deeper magnets, each design at the gap that suits it
 * best. The winding fills the gap but for 1 mm on each side and all else is common, so the ohmic loss at equal delivered
 * power goes as 1 / (line B^2 x thickness).
 */

/** An invented machine with twin discs, lengths in mm, seen at its mean radius alone. */
interface Geometry {
  readonly poles: number;
  readonly meanRadius: number;
  readonly length: number;
  readonly magnet: number;
  readonly disc: number;
}

/** Magnets a quarter and a sixth of the pole pitch deep. */
const mill: Geometry = { poles: 16, meanRadius: 128, length: 55, magnet: 12, disc: 10 };
const winch: Geometry = { poles: 12, meanRadius: 110, length: 50, magnet: 10, disc: 12 };
/** Magnets a third of the pole pitch deep. */
const stout: Geometry = { poles: 20, meanRadius: 100, length: 40, magnet: 10, disc: 7 };

/** `on`: interpoles as deep as the magnets, on the disc. */
interface Design {
  readonly interpoles: 'none' | 'on' | 'through';
  readonly double: boolean;
}
const designs = {
  plain: { interpoles: 'none', double: false },
  on: { interpoles: 'on', double: false },
  through: { interpoles: 'through', double: false },
  double: { interpoles: 'none', double: true },
  doubleThrough: { interpoles: 'through', double: true },
} as const satisfies Record<string, Design>;

const polePitch = ({ poles, meanRadius }: Geometry): number => (2 * Math.PI * meanRadius) / poles;

/** @param room between the magnets, share of the pole pitch; interpoles fill it */
function buildMachine(geometry: Geometry, { interpoles, double }: Design, room: number, gap: number): Machine {
  const { poles, meanRadius, length, disc } = geometry;
  const depth = double ? 2 * geometry.magnet : geometry.magnet;
  const between =
    interpoles === 'none'
      ? ''
      : `interpoles: { depth: ${interpoles === 'on' ? `${depth} mm` : 'through'}, material: bar }`;
  const text = `
format: gapwright-machine/1
name: Trends
materials: { bar: { kind: magnet, remanence: 1.3 T, recoil: 1.05 } }
rotor:
  poles: ${poles}
  gap: ${gap} mm
  disc:
    material: AISI 1008
    thickness: ${disc} mm
    inner_radius: ${meanRadius - length / 2} mm
    outer_radius: ${meanRadius + length / 2} mm
  magnets:
    shape: sector
    arc: ${1 - room}
    length: ${length} mm
    thickness: ${depth} mm
    mean_radius: ${meanRadius} mm
    material: bar
  ${between}
winding:
  layout: overlapped
  coils: ${(3 * poles) / 2}
  turns: 10
  leg_width: fill
  leg_shape: tapered
  clearance: 1 mm
  wire: { diameter: 0.5 mm }
operation: { speed: 300 rpm }
model: { radii: 1, accuracy: 1 %, end_correction: off }
`;
  return readMachine(text, { file: 'trends.yaml' }).machine;
}

interface Seen {
  /** mm. */
  readonly gap: number;
  /** Line B squared x thickness of the winding, T^2 mm. */
  readonly merit: number;
  readonly thirdOfLine: number;
}

function look(geometry: Geometry, design: Design, room: number, gap: number): Seen {
  const machine = buildMachine(geometry, design, room, gap);
  const slices = machine.model.slices.map((slice) => solveSlice(machine, slice).answer);
  for (const { converged, accurate } of slices) expect([converged, accurate]).toEqual([true, true]);
  const result = describeMachine(machine, { slices }, [], { version: '0', inputSha256: '' });
  return {
    gap,
    merit: 1000 * result.merit.line_B_squared_thickness_T2m,
    thirdOfLine: result.effective_B.third_share_line,
  };
}

/** Gaps looked at in search of the best, shares of the pole pitch. */
const GAPS = [0.12, 0.2, 0.32, 0.5, 0.75, 1.2];

interface Best extends Seen {
  /** All gaps of `GAPS`. */
  readonly sampled: readonly Seen[];
}

/** The best gap: twice, the vertex of the parabola through the best three, in the logarithm of the gap. */
function findBest(geometry: Geometry, design: Design, room: number, shares: readonly number[] = GAPS): Best {
  const sampled = shares.map((share) => look(geometry, design, room, share * polePitch(geometry)));
  const known = [...sampled];
  for (let round = 0; round < 2; round++) {
    known.sort((a, b) => a.gap - b.gap);
    const top = known.findIndex(({ merit }) => merit === Math.max(...known.map((seen) => seen.merit)));
    const [left, middle, right] = known.slice(Math.min(Math.max(top - 1, 0), known.length - 3));
    known.push(look(geometry, design, room, Math.exp(vertex(left, middle, right))));
  }
  return { ...known.reduce((a, b) => (b.merit > a.merit ? b : a)), sampled };
}

function vertex(left: Seen, middle: Seen, right: Seen): number {
  const [x0, x1, x2] = [left, middle, right].map(({ gap }) => Math.log(gap));
  const [s0, s1] = [(middle.merit - left.merit) / (x1 - x0), (right.merit - middle.merit) / (x2 - x1)];
  return (x0 + x1) / 2 - (s0 * (x2 - x0)) / 2 / (s1 - s0);
}

/** Gaps near the best of a design with double depth or interpoles through the disc. */
const NEAR = [0.32, 0.4, 0.5];

type Designs = Readonly<Record<keyof typeof designs, Best>>;

const findAllBest = (geometry: Geometry, room: number): Designs => ({
  plain: findBest(geometry, designs.plain, room),
  on: findBest(geometry, designs.on, room),
  through: findBest(geometry, designs.through, room),
  double: findBest(geometry, designs.double, room),
  doubleThrough: findBest(geometry, designs.doubleThrough, room),
});

const THIRD = 1 / 3;
const FIFTH = 1 / 5;

/** Dissipations in per cent of the plain design's, as found here: the test's own record of them. */
const cases = [
  ['mill', mill, THIRD, { plain: 100, on: 69.8, through: 58.1, double: 74.4, doubleThrough: 38.1 }],
  ['winch', winch, FIFTH, { plain: 100, on: 87.5, through: 78.0, double: 65.5, doubleThrough: 48.6 }],
] as const;

describe.each(cases)('%s', (name, geometry, room, expected) => {
  let best: Designs;
  let dissipation: Record<keyof typeof designs, number>;
  beforeAll(() => {
    best = findAllBest(geometry, room);
    const percent = ({ merit }: Best): number => (100 * best.plain.merit) / merit;
    dissipation = {
      plain: 100,
      on: percent(best.on),
      through: percent(best.through),
      double: percent(best.double),
      doubleThrough: percent(best.doubleThrough),
    };
  }, 60_000);

  test('the line has no third harmonic, whatever the gap', () => {
    for (const { sampled } of Object.values(best)) {
      for (const { thirdOfLine } of sampled) expect(thirdOfLine).toBe(0);
    }
  });

  test('line B squared x thickness rises with the gap to one maximum and falls from there', () => {
    for (const { sampled, merit } of Object.values(best)) {
      const rising = sampled.slice(1).map((seen, i) => seen.merit > sampled[i].merit);
      expect(rising[0]).toBe(true);
      expect(rising.at(-1)).toBe(false);
      expect(rising.filter((rises, i) => i > 0 && rises !== rising[i - 1])).toEqual([false]);
      expect(merit).toBeGreaterThanOrEqual(Math.max(...sampled.map((seen) => seen.merit)));
    }
  });

  test('interpoles on the disc, through it, and with magnets twice as deep each save more', () => {
    const { plain, on, through, doubleThrough } = dissipation;
    const order = [plain, on, through, doubleThrough];
    expect(order).toEqual([...order].sort((a, b) => b - a));
    expect(new Set(order).size).toBe(4);
    for (const [key, percent] of Object.entries(dissipation)) {
      expect(Math.abs(percent - expected[key as keyof typeof designs]), `${name}, ${key}: ${percent} %`).toBeLessThan(
        0.5,
      );
    }
  });
});

/** Dissipation of double magnet depth over that of single depth with interpoles through the disc, less 1. */
function doubleAgainstThrough(geometry: Geometry, room: number): number {
  const best = (design: Design): Seen => findBest(geometry, design, room, NEAR);
  return best(designs.through).merit / best(designs.double).merit - 1;
}

/**
 * The room at which double magnet depth and interpoles through the disc are worth the same: by the secant from `low` to
 * `high`, then by the parabola through all three points in the other direction.
 */
function findCrossing(geometry: Geometry, low: number, high: number): number {
  const [atLow, atHigh] = [low, high].map((room) => doubleAgainstThrough(geometry, room));
  expect(atLow).toBeLessThan(0);
  expect(atHigh).toBeGreaterThan(0);
  const middle = low - (atLow * (high - low)) / (atHigh - atLow);
  const atMiddle = doubleAgainstThrough(geometry, middle);
  const share = (x: number, fx: number, fy: number, fz: number): number => (x * fy * fz) / ((fx - fy) * (fx - fz));
  return (
    share(low, atLow, atMiddle, atHigh) + share(middle, atMiddle, atLow, atHigh) + share(high, atHigh, atLow, atMiddle)
  );
}

/**
 * Shares of the pole pitch at which the two are worth the same, as found here, and shares on either side of them. Magnets of
 * a quarter of the pole pitch or less: between a fifth and a third. The deeper the magnets are already, the less is gained
 * by more depth: with a third of the pole pitch, interpoles are still better at a fifth.
 */
const crossings = [
  ['winch', winch, FIFTH, THIRD, 0.278],
  ['mill', mill, FIFTH, THIRD, 0.225],
  ['stout', stout, 0.12, FIFTH, 0.147],
] as const;

test.each(crossings)(
  'double depth is worse than interpoles through the disc where these have much room, better where little: %s',
  (_, geometry, low, high, expected) => {
    const crossing = findCrossing(geometry, low, high);
    expect(Math.abs(crossing - expected), `crossing at ${crossing}`).toBeLessThan(0.004);
  },
);
