import type { Answer, Probe, Section, Setup } from '@gapwright/fem-core';
import {
  buildLocator,
  drive,
  fluxBetween,
  forceOn,
  InputError,
  MU0,
  probeSteps,
  solveProbes,
  valueAt,
} from '@gapwright/fem-core';
import { triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';

const AIR = { kind: 'linear', muR: 1 } as const;
const wire = (name: string, x: number, y = 0, radius = 0.002) =>
  ({ name, shape: { kind: 'circle', centre: [x, y], radius } }) as const;

function answerOf<Kind extends Answer['kind']>(answers: readonly Answer[], kind: Kind, name: string) {
  const found = answers.find((answer) => answer.name === name);
  if (found?.kind !== kind) throw new Error(`no ${kind} of the name ${name}`);
  return found as Extract<Answer, { kind: Kind }>;
}

/** Field of straight currents [x, y, amperes] in unbounded space (Biot, Savart). */
function exactField(wires: readonly (readonly [number, number, number])[], x: number, y: number): [number, number] {
  let [bx, by] = [0, 0];
  for (const [wx, wy, amperes] of wires) {
    const [dx, dy] = [x - wx, y - wy];
    const share = (MU0 * amperes) / (2 * Math.PI * (dx * dx + dy * dy));
    bx -= share * dy;
    by += share * dx;
  }
  return [bx, by];
}

describe.each([
  ['a circle', { kind: 'circle', centre: [0.001, -0.002], radius: 0.03 }],
  ['a rectangle', { kind: 'rectangle', from: [-0.02, -0.03], to: [0.03, 0.02] }],
  [
    'a polygon',
    {
      kind: 'polygon',
      corners: [
        [-0.025, -0.02],
        [0.03, -0.02],
        [0, 0.03],
      ],
    },
  ],
] as const)('unbounded space round %s', (_, outline) => {
  const section: Section = {
    outline,
    open: true,
    background: 'air',
    regions: [wire('a', 0.006, 0.001), wire('b', -0.008, -0.004)],
  };
  const materials = { air: AIR, a: AIR, b: AIR };
  const places = [
    [0.012, -0.008],
    [0.0005, 0.004],
    [0.05, 0.01],
    [-0.2, 0.3],
    [5, -1],
  ] as const;

  test.each([
    ['currents that cancel', 10, -10],
    ['a net current', 10, 4],
  ])('%s: B is that of the wires, near and far beyond the mesh', (_name, a, b) => {
    const { field, recovered } = solveProbes(section, { materials, current: { a, b } }, [], { accuracy: 1e-3 });
    const locator = buildLocator(field.mesh);
    for (const [x, y] of places) {
      const value = valueAt(field, locator, x, y, recovered);
      const [bx, by] = exactField(
        [
          [0.006, 0.001, a],
          [-0.008, -0.004, b],
        ],
        x,
        y,
      );
      expect(Math.hypot((value?.bx ?? NaN) - bx, (value?.by ?? NaN) - by)).toBeLessThan(1e-2 * Math.hypot(bx, by));
    }
  });

  test('A is without a step where the mesh ends, and its differences are the flux', () => {
    const { field } = solveProbes(section, { materials, current: { a: 10, b: 4 } }, [], { accuracy: 1e-3 });
    const locator = buildLocator(field.mesh);
    const { centre, radius } = field.mesh.beyond ?? { centre: [0, 0], radius: 0 };
    for (const angle of [0.3, 2, 4]) {
      const at = (r: number): number =>
        valueAt(field, locator, centre[0] + r * Math.cos(angle), centre[1] + r * Math.sin(angle))?.a ?? NaN;
      const jump = at(radius * (1 + 1e-7)) - at(radius * (1 - 1e-7));
      expect(Math.abs(jump)).toBeLessThan(1e-5 * MU0 * 10);
    }
    // Far out the flux between two circles is mu0 I/(2 pi) ln of their radii.
    const far = fluxBetween(field, locator, [10, 0], [100, 0]) ?? NaN;
    expect(far / (((MU0 * 14) / (2 * Math.PI)) * Math.log(10))).toBeCloseTo(1, 2);
  });

  test('the wires push each other with mu0 I I/(2 pi D), and not themselves', () => {
    const { answers } = solveProbes(
      section,
      { materials, current: { a: 10, b: -10 } },
      [
        { kind: 'force', name: 'on a', on: ['a'] },
        { kind: 'force', name: 'on b', on: ['b'] },
      ],
      { accuracy: 5e-3 },
    );
    const [onA, onB] = [answerOf(answers, 'force', 'on a'), answerOf(answers, 'force', 'on b')];
    const size = (MU0 * 100) / (2 * Math.PI * Math.hypot(0.014, 0.005));
    expect(Math.hypot(onA.fx, onA.fy) / size).toBeCloseTo(1, 2);
    expect(Math.hypot(onA.fx + onB.fx, onA.fy + onB.fy)).toBeLessThan(1e-2 * size); // actio = reactio
    expect(onA.fx).toBeGreaterThan(0); // unlike currents part
  });
});

describe('answers to a wanted accuracy', () => {
  const section: Section = {
    outline: { kind: 'rectangle', from: [-0.06, -0.05], to: [0.06, 0.05] },
    background: 'air',
    regions: [
      { name: 'magnet', shape: { kind: 'rectangle', from: [-0.01, 0.004], to: [0.01, 0.014] } },
      { name: 'plate', shape: { kind: 'rectangle', from: [-0.03, -0.008], to: [0.03, 0] } },
      { name: 'coil', shape: { kind: 'rectangle', from: [-0.03, 0.02], to: [-0.02, 0.03] } },
    ],
  };
  const setup: Setup = {
    materials: {
      air: AIR,
      coil: AIR,
      magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] },
      plate: { kind: 'linear', muR: 500 },
    },
  };
  const probes: readonly Probe[] = [
    { kind: 'force', name: 'pull', on: ['magnet'] },
    { kind: 'linkage', name: 'linkage', of: 'coil', turns: 40 },
    { kind: 'flux', name: 'flux', from: [-0.03, 0.002], to: [0, 0.002] },
    { kind: 'mean', name: 'plate', over: ['plate'] },
    { kind: 'point', name: 'point', at: [0.002, 0.002] },
    { kind: 'line', name: 'line', from: [-0.02, 0.002], to: [0.02, 0.002], points: 9 },
  ];
  const fine = solveProbes(section, setup, probes, { accuracy: 3e-4 });

  test.each([0.05, 0.01, 2e-3])(
    'at %s every figure is within its error, and what is bound within the accuracy',
    (accuracy) => {
      const { answers, accurate, error, energy, energyError } = solveProbes(section, setup, probes, { accuracy });
      expect(accurate).toBe(true);
      expect(error).toBeLessThanOrEqual(accuracy);
      expect(Math.abs(energy - fine.energy)).toBeLessThan(energyError + fine.energyError);
      const [pull, best] = [answerOf(answers, 'force', 'pull'), answerOf(fine.answers, 'force', 'pull')];
      expect(Math.hypot(pull.fx - best.fx, pull.fy - best.fy)).toBeLessThan(pull.error.force + best.error.force);
      expect(Math.abs(pull.torque - best.torque)).toBeLessThan(pull.error.torque + best.error.torque);
      expect(pull.error.force).toBeLessThanOrEqual(Math.SQRT2 * accuracy * Math.hypot(pull.fx, pull.fy));
      for (const [kind, name, key] of [
        ['linkage', 'linkage', 'linkage'],
        ['flux', 'flux', 'flux'],
        ['mean', 'plate', 'b'],
      ] as const) {
        const [got, want] = [answerOf(answers, kind, name), answerOf(fine.answers, kind, name)] as unknown as Record<
          string,
          number
        >[];
        expect(Math.abs(got[key] - want[key])).toBeLessThan(got.error + want.error);
      }
      const [point, bestPoint] = [answerOf(answers, 'point', 'point'), answerOf(fine.answers, 'point', 'point')];
      const off = Math.hypot(
        (point.value?.bx ?? NaN) - (bestPoint.value?.bx ?? NaN),
        (point.value?.by ?? NaN) - (bestPoint.value?.by ?? NaN),
      );
      expect(off).toBeLessThan(point.error.b + bestPoint.error.b);
    },
  );

  test('what is told is what the field says', () => {
    const { field, recovered, answers } = fine;
    const locator = buildLocator(field.mesh);
    const pull = answerOf(answers, 'force', 'pull');
    expect(pull).toMatchObject(forceOn(field, ['magnet']));
    const line = answerOf(answers, 'line', 'line');
    expect(line.distance).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8].map((i) => expect.closeTo(0.005 * i, 12)));
    expect(line.values[4]).toEqual(valueAt(field, locator, 0, 0.002, recovered));
    expect(answerOf(answers, 'flux', 'flux').flux).toBe(fluxBetween(field, locator, [-0.03, 0.002], [0, 0.002]));
  });

  test('a limit met short of the accuracy is told, with the errors as they are', () => {
    const few = solveProbes(section, setup, probes, { accuracy: 1e-12, maxMeshes: 2 });
    expect([few.accurate, few.meshes]).toEqual([false, 2]);
    expect(few.error).toBeGreaterThan(1e-12);
    const small = solveProbes(section, setup, probes, { accuracy: 1e-12, maxTriangles: 500 });
    expect(small.accurate).toBe(false);
    expect(triangleCount(small.field.mesh)).toBeLessThanOrEqual(1000);
  });

  test('places outside have no value, and a flux from there none either', () => {
    const outside: readonly Probe[] = [
      { kind: 'point', name: 'p', at: [1, 0] },
      { kind: 'flux', name: 'f', from: [1, 0], to: [0, 0] },
    ];
    const { answers, accurate } = solveProbes(section, setup, outside, { accuracy: 0.05 });
    expect(accurate).toBe(true);
    expect(answerOf(answers, 'point', 'p').value).toBeUndefined();
    expect(answerOf(answers, 'flux', 'f').flux).toBeNaN();
  });

  test('probes of what is not there are refused by name', () => {
    const ask = (probe: Probe) => () => solveProbes(section, setup, [probe], { accuracy: 0.05 });
    expect(ask({ kind: 'linkage', name: 'x', of: 'nowhere', turns: 1 })).toThrow('probes.x: nowhere covers no area');
    expect(ask({ kind: 'mean', name: 'x', over: [] })).toThrow(InputError);
    expect(ask({ kind: 'force', name: 'x', on: ['air'] })).toThrow(InputError);
  });

  test('no sources: no field, no force, all of it exact', () => {
    const still = { materials: { ...setup.materials, magnet: AIR } };
    const { accurate, energy, answers } = solveProbes(section, still, probes, { accuracy: 1e-6 });
    expect([accurate, energy]).toEqual([true, 0]);
    expect(answerOf(answers, 'force', 'pull')).toMatchObject({ fx: 0, fy: 0, torque: 0 });
  });

  test('magnets in a closed circuit store no energy, and are done all the same', () => {
    // A ring magnetised along its circles: B = Br, H = 0.
    const ring: Section = {
      outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
      background: 'air',
      regions: [wire('ring', 0, 0, 0.03), wire('bore', 0, 0, 0.02)],
    };
    const round = {
      kind: 'directed-magnet',
      direction: { angle: Math.PI / 2, turns: 1 },
      recoil: 1.05,
      along: 1.1,
    } as const;
    const { accurate, answers } = solveProbes(
      ring,
      { materials: { air: AIR, bore: AIR, ring: round } },
      [{ kind: 'mean', name: 'ring', over: ['ring'] }],
      { accuracy: 1e-2 },
    );
    expect(accurate).toBe(true);
    expect(answerOf(answers, 'mean', 'ring').b).toBeCloseTo(1.1, 3);
  });
});

describe('driven from outside', () => {
  const section: Section = {
    outline: { kind: 'circle', centre: [0, 0], radius: 0.02 },
    background: 'air',
    regions: [wire('wire', 0)],
  };
  const setup = (amperes: number): Setup => ({ materials: { air: AIR, wire: AIR }, current: { wire: amperes } });
  const pause = () => Promise.resolve();

  test('two solves in turn do not disturb each other', () => {
    const alone = [1, 2].map((amperes) => solveProbes(section, setup(amperes), [], { accuracy: 1e-3 }));
    const steps = [1, 2].map((amperes) => probeSteps(section, setup(amperes), [], { accuracy: 1e-3 }));
    const ends = steps.map(() => undefined as ReturnType<typeof solveProbes> | undefined);
    while (ends.includes(undefined)) {
      steps.forEach((one, i) => {
        const next = one.next();
        if (next.done === true) ends[i] ??= next.value;
      });
    }
    ends.forEach((end, i) => {
      expect(end?.field.potential).toEqual(alone[i].field.potential);
      expect(end?.energy).toBe(alone[i].energy);
    });
  });

  test('progress is told, the error falling to what was wanted', async () => {
    const errors: number[] = [];
    const answer = await drive(probeSteps(section, setup(1), [], { accuracy: 1e-4 }), {
      pause,
      onStep: (progress) => {
        if ('error' in progress) errors.push(progress.error);
      },
    });
    expect(errors.length).toBe(answer.meshes);
    expect(errors.at(-1)).toBeLessThanOrEqual(1e-4);
    expect(errors[0]).toBeGreaterThan(1e-4);
  });

  test('called off, it ends with the reason given, at the next step', async () => {
    const off = new AbortController();
    let steps = 0;
    const run = drive(probeSteps(section, setup(1), [], { accuracy: 1e-6 }), {
      pause,
      signal: off.signal,
      onStep: () => {
        steps++;
        off.abort(new Error('changed my mind'));
      },
    });
    await expect(run).rejects.toThrow('changed my mind');
    expect(steps).toBe(1);
  });
});
