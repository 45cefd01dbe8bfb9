import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { faultsOf, readHut } from './hut.js';

const warningsOf = (...settings: readonly string[]): string =>
  readHut(...settings)
    .warnings.map(({ key, text }) => `${key}: ${text}`)
    .join('\n');

describe('magnets', () => {
  test('blocks that overlap at their inner radius are told with the room there and what would do', () => {
    // 2 pi 100.5 mm / 16 = 39.47 mm
    expect(faultsOf(() => readHut('rotor.magnets.width=45 mm'))).toEqual([
      '--set rotor.magnets.width:1:1: rotor.magnets.width: neighbouring magnets overlap: 45 mm wide, but at their inner radius ' +
        'of 100.5 mm there are only 39.47 mm from pole to pole; give at most 39.4 mm, or a mean_radius of at least 142.3 mm',
    ]);
  });

  test('what the message says would do does do, and a little more does not', () => {
    fc.assert(
      fc.property(fc.integer({ min: 80, max: 300 }), fc.integer({ min: 20, max: 60 }), (meanRadius, length) => {
        const around = [
          `rotor.magnets.mean_radius=${meanRadius} mm`,
          `rotor.magnets.length=${length} mm`,
          'rotor.disc={thickness: 10 mm, inner_radius: 1 mm, outer_radius: 1 m}',
          `winding.opening={inner_radius: ${meanRadius - 10} mm, outer_radius: ${meanRadius + 10} mm, inner_width: 1 mm, outer_width: 4 mm}`,
          'winding.leg_width=10 mm',
          'winding.turns=20',
        ];
        const [fault] = faultsOf(() => readHut('rotor.magnets.width=200 mm', ...around));
        const [, width, radius] = /at most ([\d.]+) mm, or a mean_radius of at least ([\d.]+) mm/.exec(fault) ?? [];
        expect(() => readHut(`rotor.magnets.width=${width} mm`, ...around)).not.toThrow();
        expect(() => readHut(`rotor.magnets.width=${Number(width) * 1.004} mm`, ...around)).toThrow(/overlap|too thin/);
        expect(
          faultsOf(() =>
            readHut('rotor.magnets.width=200 mm', ...around, `rotor.magnets.mean_radius=${radius} mm`),
          ).join(),
        ).not.toMatch(/neighbouring magnets/);
      }),
      { numRuns: 20 },
    );
  });

  test('magnets that touch at their inner radius are allowed', () => {
    const pitch = (2 * Math.PI * 100.5) / 16;
    expect(() => readHut(`rotor.magnets.width=${pitch} mm`)).not.toThrow();
  });

  test('magnets that reach the shaft', () => {
    expect(faultsOf(() => readHut('rotor.magnets.length=256 mm'))).toEqual([
      '--set rotor.magnets.length:1:1: rotor.magnets.length: 256 mm about a mean radius of 128 mm reaches the shaft; give ' +
        'less than 256 mm',
    ]);
  });

  test('odd poles', () => {
    expect(faultsOf(() => readHut('rotor.poles=17'))).toEqual([
      '--set rotor.poles:1:1: rotor.poles: must be even, got 17; north and south alternate: give 16 or 18',
    ]);
  });

  test('sectors take a share of the pole pitch, from just above 0 to 1', () => {
    const sector = (arc: string) =>
      `rotor.magnets={shape: sector, ${arc} length: 55 mm, thickness: 12 mm, mean_radius: 128 mm, material: N42}`;
    expect(readHut(sector('arc: 1,')).machine.rotor.magnets).toMatchObject({ shape: 'sector', arc: 1 });
    expect(readHut(sector('arc: 75 %,')).machine.rotor.magnets).toMatchObject({ arc: 0.75 });
    expect(faultsOf(() => readHut(sector('')))[0]).toContain('rotor.magnets.arc: is missing');
    expect(faultsOf(() => readHut(sector('arc: 1.2,')))[0]).toContain('rotor.magnets.arc: must be at most 1, got 1.2');
    expect(faultsOf(() => readHut(sector('arc: 0,')))[0]).toContain('rotor.magnets.arc: must be more than 0, got 0');
  });

  test('a temperature at which the linear law leaves no remanence', () => {
    expect(faultsOf(() => readHut('rotor.magnets.temperature=900 degC'))[0]).toContain(
      'rotor.magnets.temperature: at 900 degC the slope of -0.12 %/K leaves no remanence',
    );
  });
});

describe('disc', () => {
  test.each([
    [
      'rotor.disc.outer_radius=150 mm',
      'rotor.disc.outer_radius: the disc ends at 150 mm, its magnets at 155.5 mm; give at least 155.5 mm',
    ],
    [
      'rotor.disc.inner_radius=110 mm',
      'rotor.disc.inner_radius: the disc begins at 110 mm, its magnets at 100.5 mm; give at most 100.5 mm',
    ],
    [
      'rotor.disc.inner_radius=165 mm',
      'rotor.disc.inner_radius: the hole of 165 mm leaves nothing of a disc of 165 mm',
    ],
    ['rotor.disc.clamp_radius=165 mm', 'rotor.disc.clamp_radius: must lie within the disc of 165 mm, got 165 mm'],
    [
      'rotor.disc={material: none, thickness: 1 mm}',
      'rotor.disc.thickness: material none takes no sizes, got thickness',
    ],
    ['rotor.disc={material: DC01, thickness: 1 mm, inner_radius: 9 mm}', 'rotor.disc.outer_radius: is missing'],
  ])('%s', (setting, message) => {
    expect(faultsOf(() => readHut(setting)).join('\n')).toContain(message);
  });

  test('block corners that stand over the rim are allowed, with a warning', () => {
    // sqrt(155.5^2 + 14^2) = 156.13 mm
    expect(warningsOf('rotor.disc.outer_radius=155.5 mm')).toContain(
      "rotor.disc.outer_radius: the magnets' corners reach 156.1 mm and stand over the disc of 155.5 mm",
    );
    expect(warningsOf('rotor.disc.outer_radius=156.2 mm')).not.toContain('corners');
  });

  test('a clamp behind the magnets and an idle keeper are allowed, with a warning', () => {
    expect(warningsOf('rotor.disc.clamp_radius=120 mm')).toContain('behind magnets that begin at 100.5 mm');
    expect(warningsOf('rotor.keeper={thickness: 8 mm}')).toContain('rotor.keeper: not used');
  });
});

describe('operation', () => {
  test('an overspeed below the speed and a cold above the ambient are allowed, with a warning', () => {
    expect(warningsOf('operation.overspeed=300 rpm')).toContain('300 rpm is less than the speed of 420 rpm');
    expect(warningsOf('operation.cold=30 degC')).toContain('30 degC is warmer than the ambient 15 degC');
  });
});

describe('layers and slots too thin to be meshed', () => {
  test.each([
    ['rotor.disc.thickness=0.001 mm', 'rotor.disc.thickness: a disc of 0.001 mm'],
    ['rotor.magnets.thickness=0.02 mm', 'rotor.magnets.thickness: a magnet of 0.02 mm'],
    ['winding.thickness=0.01 mm', 'winding.thickness: a winding of 0.01 mm'],
    ['rotor.magnets.width=39.465 mm', 'rotor.magnets.width: the slot between magnets of'],
  ])('%s', (setting, told) => {
    const fault = faultsOf(() => readHut(setting, 'winding.turns=1', 'winding.wire={diameter: 0.05 mm}')).join('\n');
    expect(fault).toContain(told);
    expect(fault).toContain('a thousandth of the pole pitch');
  });

  test('air of a hair between winding and magnets is refused, none at all is not', () => {
    expect(faultsOf(() => readHut('winding.clearance=0 mm', 'winding.thickness=18.9 mm')).join()).toMatch(
      /air between/,
    );
    expect(() => readHut('winding.clearance=0 mm', 'winding.thickness=19 mm')).not.toThrow();
  });
});

test('magnets too hot to keep any coercivity are refused', () => {
  expect(faultsOf(() => readHut('rotor.magnets.temperature=200 degC')).join()).toMatch(/leaves no coercivity/);
});

describe('round magnets', () => {
  const round = (diameter: string, meanRadius = '128 mm') =>
    `rotor.magnets={shape: round, diameter: ${diameter}, thickness: 12 mm, mean_radius: ${meanRadius}, material: N42}`;

  test('that overlap when unrolled are told with what would do, and that does', () => {
    // 2 x 128 mm sin(atan(pi/16)) = 49.32 mm
    const [fault] = faultsOf(() => readHut(round('49.5 mm'), 'model.radii=auto'));
    expect(fault).toContain('49.5 mm across, but unrolled there is room for no more than 49.32 mm');
    const [, diameter, radius] = /give at most ([\d.]+) mm, or a mean_radius of at least ([\d.]+) mm/.exec(fault) ?? [];
    expect(() => readHut(round(`${diameter} mm`), 'model.radii=auto')).not.toThrow();
    expect(() => readHut(round('49.3 mm'), 'model.radii=auto')).not.toThrow();
    const wider = readWarned(round('49.5 mm', `${radius} mm`), 'rotor.disc.outer_radius=200 mm', 'model.radii=auto');
    expect(wider).not.toContain('overlap');
  });
});

/** Faults and warnings in one. */
function readWarned(...settings: readonly string[]): string {
  try {
    return warningsOf(...settings);
  } catch (error) {
    return String(error);
  }
}

describe('Halbach arrays', () => {
  test('are sectors that fill the pole pitch', () => {
    expect(faultsOf(() => readHut('rotor.magnets.segments=2'))[0]).toContain(
      'the pieces of a Halbach array are sectors',
    );
    const array =
      'rotor.magnets={shape: sector, segments: 4, arc: 0.5, length: 55 mm, thickness: 12 mm, mean_radius: 128 mm, material: N42}';
    expect(readHut(array).machine.rotor.magnets).toMatchObject({ arc: 1, segments: 4 });
    expect(faultsOf(() => readHut(array, 'rotor.interpoles={depth: 12 mm, material: N42}'))[0]).toContain(
      'a Halbach array fills the pole pitch',
    );
  });
});

describe('interpoles', () => {
  const between = (parts: string) => `rotor.interpoles={material: N42, ${parts}}`;

  test('through the disc, in words or as deep as magnets and disc together', () => {
    const of = (...settings: readonly string[]) => readHut(...settings).machine.rotor.interpoles;
    expect(of(between('depth: through'))).toMatchObject({ width: 'fill', depth: 0.022, through: true });
    expect(of(between('depth: 22 mm'))).toMatchObject({ through: true });
    expect(of(between('depth: 21 mm'))).toMatchObject({ through: false });
    // 1 mm + 0.7 mm is more than 1.7 mm by the rounding of their fractions.
    const thin = ['rotor.magnets.thickness=1 mm', 'rotor.disc.thickness=0.7 mm'];
    expect(of(...thin, between('depth: 1.7 mm'))).toMatchObject({ through: true });
  });

  test.each([
    [
      ['depth: 23 mm'],
      'rotor.interpoles.depth: magnets and disc are 22 mm thick together, got 23 mm; give at most 22 mm',
    ],
    [['depth: 12 mm, width: 12 mm'], 'rotor.interpoles.width: must be at most the 11.47 mm between the main magnets'],
    [['depth: 12.01 mm'], 'the step to the back of the main magnets of 0.01 mm is too thin to be meshed'],
    [['depth: 21.99 mm'], 'the disc behind an interpole of 0.01 mm is too thin to be meshed'],
    [['depth: 12 mm', 'rotor.magnets.width=39.47841760435743 mm'], 'rotor.interpoles: there is no room between'],
    [['depth: through', 'rotor.disc={material: none}'], 'rotor.interpoles.depth: there is no disc to go through'],
    [['depth: 13 mm', 'rotor.disc={material: none}'], "must be at most the magnets' 12 mm where there is no disc"],
  ])('%j', ([parts, ...settings], message) => {
    expect(faultsOf(() => readHut(between(parts), ...settings)).join('\n')).toContain(message);
  });

  test('their material is judged at the temperature of the magnets, as that of the main ones', () => {
    const hot = 'rotor.magnets.temperature=150 degC';
    const own = (parts: string) => `materials.own={kind: magnet, remanence: 1.2 T, ${parts}}`;
    const interpoles = 'rotor.interpoles={depth: 12 mm, material: own}';
    expect(faultsOf(() => readHut(hot, own('remanence_slope: -1 %/K'), interpoles)).join()).toContain(
      'rotor.interpoles.material: at 150 degC the slope of -1 %/K leaves no remanence',
    );
    expect(warningsOf(hot, own('highest_temperature: 80 degC'), interpoles)).toMatch(
      /rotor\.interpoles\.material: own: 150 degC is above the usual limit of 80 degC[\s\S]*materials\.own\.remanence_slope: not given/,
    );
    expect(faultsOf(() => readHut('rotor.interpoles={depth: 12 mm, material: DC01}'))[0]).toContain(
      'rotor.interpoles.material: must be a magnet material, but DC01 is of kind steel-curve',
    );
    expect(warningsOf(between('depth: 12 mm').replace('N42', 'magnet_42'))).not.toContain('interpoles');
  });
});

describe('a keeper', () => {
  test('is as the disc, and has to be described where there is none', () => {
    const { keeper } = readHut('rotor.arrangement=keeper').machine.rotor;
    expect(keeper).toEqual({ material: 'AISI 1008', thickness: 0.01 });
    const none = ['rotor.arrangement=keeper', 'rotor.disc={material: none}'];
    expect(faultsOf(() => readHut(...none)).join('\n')).toMatch(
      /the keeper's material is missing[\s\S]*thickness is missing/,
    );
    expect(faultsOf(() => readHut(...none, 'rotor.keeper={thickness: 8 mm}')).join('\n')).toContain(
      "rotor.keeper.material: the keeper's material is missing",
    );
    const own = 'rotor.keeper={material: DC01, thickness: 8 mm}';
    expect(readHut(...none, own).machine.rotor.keeper).toEqual({ material: 'DC01', thickness: 0.008 });
  });
});
