import { describe, expect, test } from 'vitest';
import { strandChoices } from '../../../packages/machine-models/src/losses/strand-choices.js';
import { windingEddies } from '../../../packages/machine-models/src/losses/winding-eddies.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { hutHydro, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';
import { closedFormFields } from './made-fields.js';

/** Some round wires that are sold. */
const SOLD = [
  0.25, 0.28, 0.315, 0.355, 0.4, 0.45, 0.5, 0.56, 0.6, 0.63, 0.71, 0.8, 0.85, 0.9, 1, 1.06, 1.12, 1.18, 1.25, 1.4, 1.5,
  1.6, 1.7, 1.8, 2, 2.24, 2.5, 2.8,
].map((size) => size / 1000);
const hut = hutHydro();
const state = { speedRpm: 420, temperature: 90 };
const lossOf = (machine: Machine, changed: Partial<typeof state> = {}): number =>
  windingEddies(machine, closedFormFields(machine), { ...state, ...changed }).loss;
const wired = (strands: number, diameter: number): Machine =>
  withWinding(hut, { wire: { strands, diameter, strandArea: (Math.PI / 4) * diameter ** 2 } });

describe('eddy loss of hut hydro between ideal discs', () => {
  const found = windingEddies(hut, closedFormFields(hut), state);

  test('fundamental of By on the mid-plane alone: 12.4 W; all of it, at the faces, along x, by harmonics, 20 to 25 W', () => {
    // w^2 B1^2 d^2/(32 rho) x copper over the magnets, B1 = 0.572 T at the mean radius (practice: F3, F10).
    const w = (2 * Math.PI * 420 * 8) / 60;
    const rho = (1 + 0.00393 * 70) / 58e6;
    const copper = 2 * 12 * 58 * 2 * (Math.PI / 4) * 0.00118 ** 2 * 0.055;
    const rough = ((w * 0.572 * 0.00118) ** 2 / (32 * rho)) * copper;
    expect(rough).toBeGreaterThan(12);
    expect(rough).toBeLessThan(15);
    expect(found.loss).toBeGreaterThan(1.35 * rough);
    expect(found.loss).toBeLessThan(1.8 * rough);
  });

  test('is what wires lose that are met by the turning field, summed over height, radius and time', () => {
    const rho = (1 + 0.00393 * 70) / 58e6;
    const omega = (2 * Math.PI * 420) / 60;
    const { thickness, wire } = hut.winding;
    const [times, heights] = [256, 40];
    let sum = 0;
    for (const field of closedFormFields(hut)) {
      let square = 0;
      for (let j = 0; j < heights; j++) {
        const y = ((j + 0.5) / heights - 0.5) * thickness;
        const at = (x: number): readonly [number, number] => {
          let [bx, by] = [0, 0];
          field.order.forEach((n, i) => {
            const k = (n * Math.PI) / field.polePitch;
            const e = (k * thickness) / 2;
            const mid = (field.axial[i] * e) / Math.sinh(e);
            by += mid * Math.cosh(k * y) * Math.cos(k * x);
            bx -= mid * Math.sinh(k * y) * Math.sin(k * x);
          });
          return [bx, by];
        };
        const step = (2 * field.polePitch) / times;
        for (let i = 0; i < times; i++) {
          const [bx0, by0] = at(0.003 + i * step - 1e-6);
          const [bx1, by1] = at(0.003 + i * step + 1e-6);
          square += ((bx1 - bx0) ** 2 + (by1 - by0) ** 2) / 2e-6 ** 2;
        }
      }
      const perSecond = (square / (times * heights)) * (omega * field.radius) ** 2;
      sum += field.weight * perSecond * (0.00118 ** 2 / (16 * rho));
    }
    const copper = 2 * 12 * 58 * wire.strands * wire.strandArea; // the legs lie nearly along the radius
    expect(relativeError(found.loss, sum * copper)).toBeLessThan(3e-3);
  });

  test('brakes with loss over speed, and the shares add to less than all', () => {
    expect(relativeError(found.torque * ((2 * Math.PI * 420) / 60), found.loss)).toBeLessThan(1e-12);
    expect(found.tangentialShare).toBeGreaterThan(0.05);
    expect(found.tangentialShare).toBeLessThan(0.3);
    expect(found.harmonicShare).toBeGreaterThan(0.1);
    expect(found.harmonicShare).toBeLessThan(0.5);
    expect(relativeError(found.lengthInField, 2 * 12 * 58 * 0.055)).toBeLessThan(2e-3);
  });

  test('as thin as it is against the skin depth it goes with the square of speed, and against resistivity', () => {
    expect(relativeError(lossOf(hut, { speedRpm: 840 }), 4 * found.loss)).toBeLessThan(1e-3);
    const cold = lossOf(hut, { temperature: 20 });
    expect(relativeError(cold / found.loss, 1 + 0.00393 * 70)).toBeLessThan(1e-3);
  });

  test('of the same copper it goes with the square of the strand', () => {
    expect(relativeError(lossOf(wired(8, 0.00059)), found.loss / 4)).toBeLessThan(1e-3);
  });

  test('nothing with thin strands or at rest; the share of the ends multiplies it', () => {
    expect(lossOf(wired(1, 1e-6))).toBeLessThan(1e-9);
    const still = windingEddies(hut, closedFormFields(hut), { ...state, speedRpm: 0 });
    expect([still.loss, still.torque, still.tangentialShare]).toEqual([0, 0, 0]);
    const less = windingEddies(hut, closedFormFields(hut), { ...state, endShare: 0.8 });
    expect(relativeError(less.loss, 0.8 * found.loss)).toBeLessThan(1e-12);
    expect(less.slicesLoss).toBe(found.slicesLoss);
  });

  test('overlapped legs are radial: copper over the magnets is twice turns x coils x their length', () => {
    const machine = overlappedHydro();
    const eddies = windingEddies(machine, closedFormFields(machine), state);
    expect(relativeError(eddies.lengthInField, 2 * 24 * 20 * 0.055)).toBeLessThan(1e-3);
  });

  test('thick strands are told, round ones and flat ones each in their way', () => {
    expect(found.warnings).toEqual([]);
    const round = windingEddies(wired(1, 0.01), closedFormFields(hut), { ...state, speedRpm: 5000 });
    expect(round.sizeOverSkinDepth).toBeGreaterThan(2);
    expect(round.warnings.map(({ text }) => text).join()).toMatch(/takes its own field into account/);
    const flat = withWinding(hut, { wire: { strands: 1, width: 0.01, height: 0.001, strandArea: 1e-5 } });
    const told = windingEddies(flat, closedFormFields(flat), { ...state, speedRpm: 5000 });
    expect(told.warnings.map(({ text }) => text).join()).toMatch(/overstated/);
  });
});

describe('strands to choose from', () => {
  const fields = closedFormFields(hut);
  const choices = strandChoices(hut, fields, state, 85, SOLD);

  test('rise in number and hold the present wire with its own losses', () => {
    const counts = choices.map(({ strands }) => strands);
    expect(counts).toEqual([...counts].sort((a, b) => a - b));
    const own = choices.find(({ present }) => present);
    expect(own).toMatchObject({ strands: 2, section: 1, copperLoss: 85 });
    expect(relativeError(own?.eddyLoss ?? 0, windingEddies(hut, fields, state).loss)).toBeLessThan(1e-12);
    expect(counts).toContain(1);
    expect(new Set(counts).size).toBe(counts.length);
  });

  test('one wire of 1.7 mm loses twice what two of 1.18 mm do (practice, 6.2)', () => {
    const [one, two] = [1, 2].map((count) => choices.find(({ strands }) => strands === count)?.eddyLoss ?? 0);
    expect(one / two).toBeGreaterThan(1.9);
    expect(one / two).toBeLessThan(2.3);
  });

  test('each is what the machine wound so would lose', () => {
    for (const { strands, strand, section, eddyLoss, copperLoss } of choices) {
      if (strand.kind !== 'round') throw new Error('hut hydro has round wire');
      const machine = wired(strands, strand.diameter);
      expect(relativeError(eddyLoss, windingEddies(machine, fields, state).loss)).toBeLessThan(1e-9);
      expect(relativeError(section * copperLoss, 85)).toBeLessThan(1e-12);
      expect(relativeError(section, (strands * strand.diameter ** 2) / (2 * 0.00118 ** 2))).toBeLessThan(1e-9);
      expect(Math.abs(section - 1)).toBeLessThanOrEqual(0.08);
    }
  });

  test('more strands, less eddy loss', () => {
    const losses = choices.map(({ eddyLoss }) => eddyLoss);
    expect(losses).toEqual([...losses].sort((a, b) => b - a));
  });

  test('nothing sold near: the present wire alone', () => {
    for (const sold of [[], [0.0101]]) {
      expect(strandChoices(hut, fields, state, 85, sold).map(({ present }) => present)).toEqual([true]);
    }
  });

  test('flat wire is held against round wire of the same section', () => {
    const flat = withWinding(hut, { wire: { strands: 1, width: 0.004, height: 0.001, strandArea: 4e-6 } });
    const found = strandChoices(flat, fields, state, 85, SOLD);
    expect(found.filter(({ present }) => present).map(({ strand }) => strand.kind)).toEqual(['flat']);
    expect(found.some(({ strand }) => strand.kind === 'round')).toBe(true);
  });
});
