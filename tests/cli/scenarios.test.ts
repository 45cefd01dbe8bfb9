import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { MachineResult } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { makeFolder, run } from './run.js';

const folder = fileURLToPath(new URL('../../packages/cli/scenarios/', import.meta.url));

/** A scenario's EMF of the slices alone by hand, V rms, and how far off it may be. */
interface ByHand {
  readonly emf: number;
  /** Relative: coils of touching legs (by hand) are not the trapezia of the files, and the steel is not ideal. */
  readonly band: number;
}

/**
 * Phase EMF, V rms, of the slices alone, from the table of hand calculations that the scenarios were invented with: field
 * of the unrolled machine between ideal discs by its series (the ironless one: by the closed form of the Halbach array),
 * legs that touch their neighbours, magnets at 20 degC. EMF goes as speed, as turns and as remanence.
 */
const byHand: Readonly<Record<string, ByHand>> = {
  'hut-hydro': { emf: 53.8, band: 0.02 },
  'towed-spinner': { emf: 10.1 * (670 / 830), band: 0.03 },
  'weather-station': { emf: 11.5 * (290 / 256), band: 0.04 },
  'field-charger': { emf: 29.0 * (11 / 10) * (1 - 0.0012 * 60), band: 0.04 }, // by hand: ten turns, cold
  'lab-rig': { emf: 4.19 * (268 / 300), band: 0.03 },
  'orchard-cart': { emf: 17.2, band: 0.04 },
  'canal-launch': { emf: canalLaunch(), band: 0.05 },
};

/**
 * Fundamental at the mean radius between ideal discs, recoil 1, of main magnets and of interpoles as deep that fill the room
 * between them. With k = 2 pi / wavelength, a = k gap/2, b = k depth, the scalar potential of the charge k M cos(kx) of the
 * interpoles and of the charged faces of the main magnets, nought at the discs, gives at mid-gap
 *
 *   B_1 = Br (4/pi) [ sin(arc pi/2) sinh b + cos(arc pi/2) (cosh b - 1) ] / sinh(a + b),
 *
 * its mean over the winding is sinh(kt/2)/(kt/2) times that, and E = N omega B kw (ro^2 - ri^2) / sqrt 2.
 */
function canalLaunch(): number {
  const [k, gap, depth, thickness, arc] = [10 / 0.112, 0.013, 0.01, 0.011, 0.7];
  const remanence = 1.305 * (1 - 0.0012 * 20); // the middle of N42 grades
  const [a, b, c] = [(k * gap) / 2, k * depth, (k * thickness) / 2];
  const angle = (arc * Math.PI) / 2;
  const main = Math.sin(angle) * Math.sinh(b);
  const between = Math.cos(angle) * (Math.cosh(b) - 1);
  const field = (remanence * (4 / Math.PI) * (main + between) * (Math.sinh(c) / c)) / Math.sinh(a + b);
  const spread = (k * 0.0086) / 2; // half a leg in electrical radians
  const [turns, omega] = [10 * 3, (2 * Math.PI * 900) / 60];
  return (turns * omega * field * (Math.sin(spread) / spread) * (0.137 ** 2 - 0.087 ** 2)) / Math.SQRT2;
}

describe('the scenarios', () => {
  test('are the files of their folder, and gapwright new knows them all', async () => {
    const names = readdirSync(folder).map((file) => file.replace(/\.yaml$/, ''));
    expect(names.sort()).toEqual(Object.keys(byHand).sort());
    const listed = (await run(['new', '--list'])).out.match(/^[a-z-]+(?= )/gm);
    expect(listed).toEqual(names);
  });

  describe.each(Object.keys(byHand))('%s', (name) => {
    test('is written by gapwright new and judged sound', async () => {
      const place = makeFolder();
      expect((await run(['new', place, '--scenario', name])).status).toBe(0);
      const { status, err } = await run(['check', join(place, `${name}.yaml`)]);
      expect(status).toBe(0);
      expect(err).toBe('');
    });

    test('solves to the wanted accuracy with no false warning, and gives the EMF of the hand calculation', async () => {
      const { status, out, err } = await run(['solve', join(folder, `${name}.yaml`), '--json']);
      expect(status, err).toBe(0);
      const said = err.split('\n').filter((text) => text !== '' && !/^\d+ slices solved in /.test(text));
      expect(said).toEqual([]);
      const result: MachineResult = JSON.parse(out);
      const { emf, band } = byHand[name];
      expect(result.warnings).toEqual([]);
      expect(result.load?.efficiency).toBeGreaterThan(0.5);
      expect(result.magnets.demagnetisation_margin).toBeGreaterThan(0.1);
      for (const slice of result.slices) expect(slice.newton_steps).toBeGreaterThan(0);
      expect(result.effective_B.peak_T_rel_err).toBeLessThanOrEqual(0.002);

      const { slices_alone: alone, end_factor: endFactor = Number.NaN, phase } = result.emf;
      expect(Math.abs(alone.phase_rms_V / emf - 1), `${alone.phase_rms_V} V, by hand ${emf} V`).toBeLessThan(band);
      expect(endFactor).toBeGreaterThan(0.7);
      expect(endFactor).toBeLessThan(1.05);
      expect(Math.abs(phase.rms_V / (endFactor * alone.phase_rms_V) - 1)).toBeLessThan(1e-12);
    });
  });
});
