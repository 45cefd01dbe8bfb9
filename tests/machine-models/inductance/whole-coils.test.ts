import { expect, test } from 'vitest';
import { FINENESS, wholeCoils } from '../../../packages/machine-models/src/inductance/whole-coils.js';
import { hutHydro, MU0, overlappedHydro, relativeError } from '../../helpers/machines.js';
import { ironless, keeperHydro } from '../slices/variants.js';
import { airInductance } from './filaments.js';

test('in air: Neumann over bundles of filaments', () => {
  const machine = ironless();
  if (machine.winding.layout !== 'concentrated') throw new Error('not side by side');
  const { opening, legWidth, thickness } = machine.winding;
  const [own, next, second, third, fourth, fifth, sixth] = [0, 1, 2, 3, 4, 5, 6].map((k) =>
    airInductance(opening, legWidth, thickness, (k * Math.PI) / 6),
  ) as [number, number, number, number, number, number, number];
  const { whole } = wholeCoils(machine);
  // Twelve coils on sixteen poles: every third belongs to one phase, all the same way round.
  expect(relativeError(whole.self, 4 * (own + 2 * third + sixth))).toBeLessThan(5e-3);
  expect(relativeError(whole.mutual, 4 * (next + second + fourth + fifth))).toBeLessThan(1e-2);
});

test('the ends of coils side by side: about a ring of their length in free space', () => {
  // mu0 R (ln(8 R/g) - 2), g = 0.2235 (w + t): Grover, Inductance Calculations, 1946 (from memory); the section is not small.
  const machine = ironless();
  if (machine.winding.layout !== 'concentrated') throw new Error('not side by side');
  const { opening, legWidth, thickness } = machine.winding;
  const radius = (opening.innerWidth + opening.outerWidth + Math.PI * legWidth) / (2 * Math.PI);
  const ring = 4 * MU0 * radius * (Math.log((8 * radius) / (0.2235 * (legWidth + thickness))) - 2);
  const { whole, slices } = wholeCoils(machine);
  const ends = whole.self - whole.mutual - slices.self + slices.mutual;
  expect(ends / ring).toBeGreaterThan(0.8);
  expect(ends / ring).toBeLessThan(1.25);
});

test('ends matter less and less as legs grow', () => {
  const machine = hutHydro();
  const shares = [0.02, 0.2, 2].map((length) => {
    // A large machine, so that the legs stay as they are: 400 poles, coils of the same proportions.
    const opening = { innerRadius: 4, outerRadius: 4 + length, innerWidth: 0.02, outerWidth: 0.02 };
    const { whole, slices } = wholeCoils(
      {
        ...machine,
        rotor: { ...machine.rotor, poles: 400, magnets: { ...machine.rotor.magnets, meanRadius: 4 } },
        winding: { ...machine.winding, opening, coils: 300 },
      },
      { ...FINENESS, reach: 4, step: 3, station: 0.5 },
    );
    return (whole.self - whole.mutual) / (slices.self - slices.mutual) - 1;
  });
  expect(shares[1]).toBeLessThan(0.2 * (shares[0] ?? 0));
  expect(shares[2]).toBeLessThan(0.2 * (shares[1] ?? 0));
}, 60_000);

test('sums are fine enough', () => {
  for (const machine of [hutHydro(), overlappedHydro(), keeperHydro()]) {
    const fine = wholeCoils(machine, { reach: 24, step: 0.5, station: 0.1 });
    const usual = wholeCoils(machine);
    for (const which of ['whole', 'slices'] as const) {
      const phase = fine[which].self - fine[which].mutual;
      expect(Math.abs(usual[which].self - fine[which].self)).toBeLessThan(2e-3 * phase);
      expect(Math.abs(usual[which].mutual - fine[which].mutual)).toBeLessThan(2e-3 * phase);
    }
  }
});

test('the flux that crosses the gap one way: between free space and endless plates, as finite differences have it', () => {
  // Phase 1 of the overlapped winding, one turn a coil, m = 0 alone, by finite differences in radius and height: 0.0763 mH at
  // 20 turns in free space, 0.0885 mH with discs of 90 to 165 mm, 0.1648 mH with endless ones.
  const { homopolarBand } = wholeCoils(overlappedHydro());
  const byDiscs = (0.0885 - 0.0763) * 1e-3;
  expect(400 * homopolarBand.self).toBeGreaterThan(byDiscs);
  expect(400 * homopolarBand.self).toBeLessThan(2 * byDiscs);
});
