import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { coilEdges } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { faultsOf, readHut } from './hut.js';

const warningsOf = (...settings: readonly string[]): string =>
  readHut(...settings)
    .warnings.map(({ key, text }) => `${key}: ${text}`)
    .join('\n');

function concentrated(...settings: readonly string[]) {
  const { winding } = readHut(...settings).machine;
  if (winding.layout !== 'concentrated') throw new Error('not concentrated');
  return winding;
}

const MEAN_RADIUS = 0.128;
const OVERLAPPED = ['winding.layout=overlapped', 'winding.coils=24', 'winding.opening={}', 'winding.turns=20'];

describe('coil count', () => {
  test.each([
    [13, [], '13 coils on 16 poles make no balanced set of three phases; give 12 or 15 coils'],
    [16, [], '16 coils on 16 poles make no balanced set of three phases; give 15 or 18 coils'],
    [2, [], '2 coils on 16 poles make no balanced set of three phases; give 3 coils'],
    // where the pole pairs divide by nine, the coils have to divide by 27
    [18, [18], '18 coils on 18 poles make no balanced set of three phases; give 27 coils, or 16 or 20 poles'],
    [9, [18], '9 coils on 18 poles make no balanced set of three phases; give 27 coils, or 16 or 20 poles'],
    [12, [16, 2], '12 coils on 16 poles make no balanced set of two phases; give 32 coils, or 14 or 18 poles'],
    [12, [16, 5], '12 coils on 16 poles make no balanced set of five phases; give 10 or 15 coils'],
    [15, [10, 5], '15 coils on 10 poles make no balanced set of five phases; give 25 coils, or 8 or 12 poles'],
    [12, [16, 6], '12 coils on 16 poles make no balanced set of six phases; give 96 coils, or 14 or 22 poles'],
    [18, [16, 6], '18 coils on 16 poles make no balanced set of six phases; give 96 coils'],
  ])('%d concentrated coils, on poles and phases of %j', (coils, [poles = 16, phases = 3], message) => {
    const faults = faultsOf(() =>
      readHut(`winding.coils=${coils}`, `rotor.poles=${poles}`, `winding.phases=${phases}`),
    );
    expect(
      faults.filter((line) => line.includes('winding.coils: ')).map((line) => line.split('winding.coils: ')[1]),
    ).toEqual([message]);
  });

  test('overlapped coils are as many as phases x poles / 2', () => {
    expect(faultsOf(() => readHut(...OVERLAPPED, 'winding.leg_width=fill', 'winding.coils=12'))).toEqual([
      '--set winding.coils:1:1: winding.coils: overlapped coils are phases x poles / 2 = 24 on 16 poles, got 12; give 24, or 8 poles',
    ]);
    expect(faultsOf(() => readHut(...OVERLAPPED, 'winding.leg_width=fill', 'winding.coils=13'))[0]).toMatch(/give 24$/);
    expect(faultsOf(() => readHut(...OVERLAPPED, 'winding.leg_width=fill', 'winding.phases=5'))[0]).toContain(
      'winding.coils: overlapped coils are phases x poles / 2 = 40 on 16 poles, got 24; give 40',
    );
  });

  test.each([
    [2, 16, 12],
    [5, 20, 18],
    [5, 15, 12],
    [6, 12, 10],
    [6, 24, 22],
  ])('%i phases, %i coils on %i poles are read', (phases, coils, poles) => {
    const { winding } = readHut(
      ...[`winding.phases=${phases}`, `winding.coils=${coils}`, `rotor.poles=${poles}`, 'rotor.magnets.width=20 mm'],
      ...['winding.opening=fit', 'winding.leg_width=8 mm', 'winding.turns=20'],
    ).machine;
    expect(winding).toMatchObject({ phases, coils });
  });

  test.each(['1', '4', '7', '0', '2.5', 'three'])(
    '%s phases are refused, and nothing else is told of them',
    (phases) => {
      const faults = faultsOf(() => readHut(`winding.phases=${phases}`));
      expect(faults).toHaveLength(1);
      expect(faults[0]).toMatch(/winding\.phases: (must be 2, 3, 5 or 6, got [147]|.*); give .*3 as a rule/);
      expect(faultsOf(() => readHut(...OVERLAPPED, 'winding.leg_width=fill', `winding.phases=${phases}`))).toEqual(
        faults,
      );
    },
  );

  test('a delta joins three phases', () => {
    expect(readHut('winding.connection=delta').machine.winding.connection).toBe('delta');
    for (const phases of [2, 5, 6]) {
      const faults = faultsOf(() =>
        readHut(`winding.phases=${phases}`, 'winding.connection=delta', 'winding.coils=10'),
      );
      expect(faults.join('\n')).toContain(`winding.connection: a delta joins three phases, got ${phases}; give star`);
    }
  });
});

describe('parallel paths', () => {
  test('share the coils of a phase evenly', () => {
    expect(readHut('winding.paths=2').machine.winding.paths).toBe(2);
    expect(faultsOf(() => readHut('winding.paths=3'))).toEqual([
      '--set winding.paths:1:1: winding.paths: 4 coils per phase cannot be shared among 3 parallel paths; give one of 1, 2, 4',
    ]);
  });

  test('of unlike EMF are warned of, with what would be equal', () => {
    const tenPoles = ['rotor.poles=10', 'rotor.magnets.width=40 mm'];
    expect(warningsOf('winding.paths=4')).not.toContain('winding.paths');
    expect(warningsOf(...tenPoles, 'winding.paths=2')).not.toContain('winding.paths');
    expect(warningsOf(...tenPoles, 'winding.paths=4')).toContain(
      'winding.paths: the 4 coils of a phase are not all in step and make no 4 parallel paths of equal EMF: current runs ' +
        'between the paths even with no load; 1 or 2 would be equal',
    );
  });
});

describe('thickness', () => {
  test('a winding thicker than its room', () => {
    expect(faultsOf(() => readHut('winding.thickness=16 mm'))).toEqual([
      '--set winding.thickness:1:1: winding.thickness: the winding is thicker than its room: 16 mm, but a gap of 19 mm less ' +
        '2 mm on each side leaves 15 mm; give at most 15 mm, or a rotor.gap of at least 20 mm',
    ]);
  });

  test('clearances that take the whole gap', () => {
    expect(faultsOf(() => readHut('winding.clearance=9.5 mm'))).toEqual([
      '--set winding.clearance:1:1: winding.clearance: 9.5 mm on each side leave no room for a winding in a gap of 19 mm; ' +
        'give less than 9.5 mm, or a larger rotor.gap',
    ]);
  });
});

describe('legs of concentrated coils', () => {
  test('legs that overlap are told with the room and where', () => {
    expect(faultsOf(() => readHut('winding.leg_width=25 mm'))).toEqual([
      '--set winding.leg_width:1:1: winding.leg_width: neighbouring legs overlap: 25 mm wide, but at 104.5 mm from the shaft ' +
        'there is room for 21.34 mm; give at most 21.34 mm, or a narrower opening',
    ]);
  });

  test.each(['parallel', 'tapered'] as const)(
    '%s legs that fill touch the border to the next coil and never pass it',
    (shape) => {
      fc.assert(
        fc.property(fc.integer({ min: 2, max: 20 }), fc.integer({ min: 2, max: 40 }), (innerWidth, outerWidth) => {
          const winding = concentrated(
            'winding.leg_width=fill',
            `winding.leg_shape=${shape}`,
            'winding.turns=5',
            `winding.opening={inner_radius: 104.5 mm, outer_radius: 151.5 mm, inner_width: ${innerWidth} mm, outer_width: ${outerWidth} mm}`,
          );
          const { innerRadius, outerRadius } = winding.opening;
          const outer = Array.from({ length: 11 }, (_, i) => {
            const radius = innerRadius + ((outerRadius - innerRadius) * i) / 10;
            return coilEdges(winding, winding.opening, MEAN_RADIUS, radius).outer;
          });
          expect(Math.max(...outer)).toBeCloseTo(Math.PI / 12, 12);
        }),
        { numRuns: 30 },
      );
    },
  );

  test.each(['parallel', 'tapered'] as const)(
    'an opening that fits between %s legs lets neighbours touch at every radius',
    (shape) => {
      const winding = concentrated('winding.opening=fit', `winding.leg_shape=${shape}`);
      expect([winding.opening.innerRadius, winding.opening.outerRadius]).toEqual([0.1005, 0.1555]);
      for (const radius of [0.1005, 0.11, 0.128, 0.14, 0.1555]) {
        expect(coilEdges(winding, winding.opening, MEAN_RADIUS, radius).outer).toBeCloseTo(Math.PI / 12, 12);
      }
      expect(winding.legWidth).toBe(0.0205);
    },
  );

  test('fit may be said for the widths alone', () => {
    const opening = 'winding.opening={inner_radius: 110 mm, outer_radius: 150 mm, inner_width: fit, outer_width: fit}';
    // parallel to the border: half the width is r tan(15 deg) - w / cos(15 deg)
    const half = (radius: number) => radius * Math.tan(Math.PI / 12) - 0.0205 / Math.cos(Math.PI / 12);
    expect(concentrated(opening).opening.innerWidth).toBeCloseTo(2 * half(0.11), 14);
    expect(concentrated(opening).opening.outerWidth).toBeCloseTo(2 * half(0.15), 14);
  });

  test.each([
    [
      'winding.opening.inner_width=60 mm',
      "winding.opening.inner_width: must be less than a coil's share of the circle, 56 mm at 104.5 mm, got 60 mm",
    ],
    [
      'winding.opening.outer_width=82 mm',
      "winding.opening.outer_width: must be less than a coil's share of the circle, 81.19 mm at 151.5 mm, got 82 mm",
    ],
    ['winding.opening.inner_width=-1 mm', 'winding.opening.inner_width: must be at least 0 mm, got -1 mm'],
    [
      'winding.opening.inner_radius=151.5 mm',
      'winding.opening.outer_radius: must be more than the inner_radius of 151.5 mm, got 151.5 mm',
    ],
    ['winding.opening.inner_width=fit', 'winding.opening.outer_width: is given while the other width is to fit'],
    [
      'winding.opening={inner_radius: 20 mm, outer_radius: 30 mm, inner_width: 1 mm, outer_width: 2 mm}',
      'winding.opening.outer_radius: the legs end at 30 mm, but the magnets begin at 100.5 mm; give about 155.5 mm',
    ],
    [
      'winding.opening={inner_radius: 160 mm, outer_radius: 170 mm, inner_width: 1 mm, outer_width: 2 mm}',
      'winding.opening.inner_radius: the legs begin at 160 mm, but the magnets end at 155.5 mm; give about 100.5 mm',
    ],
    ['winding.opening={inner_radius: 104 mm}', 'winding.opening.outer_radius: is missing'],
  ])('%s', (setting, message) => {
    expect(faultsOf(() => readHut(setting)).join('\n')).toContain(message);
  });

  test('fill and fit leave each other open, and legs that leave no opening are too wide', () => {
    expect(faultsOf(() => readHut('winding.opening=fit', 'winding.leg_width=fill'))[0]).toContain(
      'winding.leg_width: legs that fill',
    );
    expect(faultsOf(() => readHut('winding.opening=fit', 'winding.leg_width=30 mm'))[0]).toContain(
      'legs of 30 mm leave no opening',
    );
  });

  test('legs that the slices would prolong past the magnets are refused', () => {
    const opening = '{inner_radius: 150 mm, outer_radius: 155 mm, inner_width: 0 mm, outer_width: 35 mm}';
    expect(
      faultsOf(() => readHut(`winding.opening=${opening}`, 'winding.leg_width=3 mm', 'winding.turns=4'))[0],
    ).toContain("winding.opening.inner_radius: the legs, prolonged to the magnets' end at 100.5 mm, pass it by");
  });

  test('openings well outside the magnets are allowed, with a warning', () => {
    expect(warningsOf('winding.opening.outer_radius=190 mm')).toContain('the legs end 34.5 mm outside the magnets');
    expect(
      warningsOf(
        'winding.opening={inner_radius: 70 mm, outer_radius: 150 mm, inner_width: 1 mm, outer_width: 30 mm}',
        'winding.leg_width=15 mm',
        'winding.turns=40',
      ),
    ).toContain('the legs begin 30.5 mm inside the magnets');
  });
});

describe('legs of overlapped coils', () => {
  test('three legs per pole, as straight strips, fill the circle at their inner ends', () => {
    // half the width is r sin(pi/48)
    const { winding } = readHut(...OVERLAPPED, 'winding.leg_width=fill').machine;
    expect(winding.legWidth).toBeCloseTo(2 * 0.1005 * Math.sin(Math.PI / 48), 14);
    expect(winding).toMatchObject({ legs: { innerRadius: 0.1005, outerRadius: 0.1555 } });
    const tapered = readHut(...OVERLAPPED, 'winding.leg_width=fill', 'winding.leg_shape=tapered').machine.winding;
    expect(tapered.legWidth).toBeCloseTo(2 * MEAN_RADIUS * Math.sin(Math.PI / 48), 14);
  });

  test('wider legs overlap', () => {
    expect(faultsOf(() => readHut(...OVERLAPPED, 'winding.leg_width=14 mm'))).toEqual([
      '--set winding.leg_width:1:1: winding.leg_width: neighbouring legs overlap: 14 mm wide, but at 100.5 mm from the shaft ' +
        'there is room for 13.15 mm; give at most 13.14 mm',
    ]);
  });
});

test.each([2, 3, 5, 6])('%i phases: as many legs per pole fill the circle', (phases) => {
  const settings = [
    `winding.phases=${phases}`,
    `winding.coils=${8 * phases}`,
    'winding.turns=5',
    'winding.leg_width=fill',
  ];
  const { winding } = readHut(...OVERLAPPED, ...settings).machine;
  expect(winding.legWidth).toBeCloseTo(2 * 0.1005 * Math.sin(Math.PI / (16 * phases)), 14);
});

test('coils that embrace as much north as south are refused, those that come near it warned of', () => {
  // three coils on 14 poles, mean span about 120 mechanical = 840 electrical degrees at most
  const three = (width: number) => [
    'rotor.poles=14',
    'rotor.magnets.width=28 mm',
    'winding.coils=3',
    'winding.leg_width=10 mm',
    'winding.turns=20',
    `winding.opening={inner_radius: 104.5 mm, outer_radius: 151.5 mm, inner_width: ${width} mm, outer_width: ${width * 1.45} mm}`,
  ];
  const spans = Array.from({ length: 40 }, (_, i) => 60 + 2 * i).map((width) => {
    try {
      return warningsOf(...three(width)).includes('much of the flux cancels') ? 'warned' : 'fine';
    } catch (error) {
      expect(String(error)).toMatch(
        /the coils span (35\d|36\d|7[12]\d)[.\d]* electrical degrees .*: north and south cancel/,
      );
      return 'refused';
    }
  });
  expect(new Set(spans)).toEqual(new Set(['fine', 'warned', 'refused']));
});

describe('copper', () => {
  test('what cannot be wound is refused with the numbers, what hand winding seldom reaches is warned of', () => {
    // 120 x 2 x pi/4 (1.18 mm)^2 / (20.5 mm x 15 mm) = 0.8535
    expect(faultsOf(() => readHut('winding.turns=120'))).toEqual([
      '--set winding.turns:1:1: winding.turns: 120 turns of 2.187 mm2 fill 0.8535 of a leg of 20.5 mm x 15 mm, but no more ' +
        'than 0.75 can be wound; give at most 105 turns, thinner wire, or a wider leg',
    ]);
    expect(warningsOf('winding.turns=105')).toContain('hand winding seldom passes 0.6');
    expect(warningsOf()).not.toContain('hand winding');
  });

  test('a tapered leg is judged at its narrow inner end', () => {
    expect(faultsOf(() => readHut('winding.leg_shape=tapered', 'winding.turns=100'))[0]).toContain(
      "fill 0.8712 of a leg of 20.5 mm x 15 mm at the leg's inner end, 16.74 mm wide",
    );
  });

  test('thick wire has a place by whole layers only', () => {
    // 14 x pi/4 (1 mm)^2 / (10 mm x 1.85 mm) = 0.59, but eleven to and fro; 1.87 mm take a second layer, sunk into the first
    const leg = (thickness: number) => [
      ...['winding.leg_width=10 mm', `winding.thickness=${thickness} mm`, 'winding.turns=14'],
      'winding.wire={diameter: 1 mm}',
    ];
    expect(warningsOf(...leg(1.85))).toContain(
      'winding.wire: 14 wires of 1 mm do not go side by side into a leg of 10 mm x 1.85 mm, where whole layers hold 11',
    );
    expect(warningsOf(...leg(1.87))).not.toContain('whole layers');
    // 4.5 x 3 mm twice across and five high in 10 x 15 mm, or three across and three high
    const flat = (turns: number) => [
      ...['winding.leg_width=10 mm', `winding.turns=${turns}`, 'winding.wire={width: 4.5 mm, height: 3 mm}'],
    ];
    expect(warningsOf(...flat(10))).not.toContain('whole layers');
    expect(() => readHut(...flat(11))).toThrow('no more than 0.95');
    expect(warningsOf('winding.turns=19', 'winding.wire={width: 4.1 mm, height: 3.1 mm}')).not.toContain(
      'whole layers',
    );
    expect(warningsOf('winding.turns=21', 'winding.wire={width: 4.1 mm, height: 3.1 mm}')).toContain(
      '21 wires of 4.1 mm x 3.1 mm do not go side by side into a leg of 20.5 mm x 15 mm, where whole layers hold 20',
    );
  });

  test('whole layers never hold more than closest packing: its fill pi/(2 sqrt 3) and half a wire on each side', () => {
    fc.assert(
      fc.property(fc.integer({ min: 50, max: 500 }), fc.integer({ min: 1, max: 300 }), (hundredths, turns) => {
        const d = hundredths / 100;
        const told = (() => {
          try {
            return warningsOf(`winding.turns=${turns}`, `winding.wire={diameter: ${d} mm}`);
          } catch {
            return undefined; // over-full
          }
        })();
        fc.pre(told !== undefined);
        const hold = Number(/layers hold (\d+)/.exec(told ?? '')?.[1] ?? turns);
        expect((hold * d * d * Math.PI) / 4).toBeLessThanOrEqual(
          (Math.PI / (2 * Math.sqrt(3))) * (20.5 + d) * (15 + d),
        );
        // a square grid is always there
        if (turns <= Math.floor(20.5 / d) * Math.floor(15 / d)) expect(told).not.toContain('whole layers');
      }),
      { numRuns: 60 },
    );
  });

  test('strands in hand count each: ten wires of a tenth of the section fill as much and lie closer', () => {
    const one = readHut('winding.turns=10', 'winding.wire={diameter: 3 mm}').machine.winding.wire;
    const ten = readHut('winding.turns=10', `winding.wire={diameter: ${3 / Math.sqrt(10)} mm, strands: 10}`).machine
      .winding.wire;
    expect(ten.strands * ten.strandArea).toBeCloseTo(one.strandArea, 15);
  });

  // ASTM B258 [from memory], digits [CALC]
  test.each([
    [10, 2.588187],
    [14, 1.627727],
    [16, 1.290846],
    [18, 1.023687],
    [20, 0.811821],
    [24, 0.510559],
  ])('AWG %i is %f mm', (awg, diameter) => {
    const wire = readHut('winding.turns=10', `winding.wire={awg: ${awg}}`).machine.winding.wire;
    expect((wire.diameter ?? 0) * 1000).toBeCloseTo(diameter, 6);
  });

  test('flat wire packs better', () => {
    expect(() => readHut('winding.wire={width: 4.9 mm, height: 1 mm}')).not.toThrow();
    expect(faultsOf(() => readHut('winding.wire={width: 5.2 mm, height: 1 mm}'))[0]).toContain('no more than 0.95');
  });

  test.each([
    ['winding.wire={awg: 18, diameter: 1 mm}', 'winding.wire: has its size given in more than one way'],
    ['winding.wire={strands: 2}', 'winding.wire: has no size; give a diameter, or awg, or width and height'],
    ['winding.wire={width: 4 mm}', 'winding.wire.height: is missing'],
    ['winding.wire={height: 4 mm, diameter: 1 mm}', 'winding.wire: has its size given in more than one way'],
    ['winding.wire={diameter: 16 mm}', 'winding.wire: wire of 16 mm is thicker than the leg, 20.5 mm x 15 mm'],
    [
      'winding.wire={width: 21 mm, height: 1 mm}',
      'winding.wire: wire of 21 mm x 1 mm is thicker than the leg, 20.5 mm x 15 mm',
    ],
    ['winding.wire={awg: 18.5}', 'winding.wire.awg: must be a whole number, got 18.5'],
  ])('%s', (setting, message) => {
    expect(faultsOf(() => readHut(setting)).join('\n')).toContain(message);
  });
});
