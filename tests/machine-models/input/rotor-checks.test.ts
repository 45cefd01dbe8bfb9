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
