import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { fillFactor, phaseResistance } from '../../../packages/machine-models/src/winding/turn.js';
import type { ChooserInput, WireChoice } from '../../../packages/machine-models/src/winding-chooser/chooser.js';
import { chooseWinding } from '../../../packages/machine-models/src/winding-chooser/chooser.js';
import { wiresInLayers } from '../../../packages/machine-models/src/winding-chooser/packing.js';
import { overallDiameter, WIRE_SIZES } from '../../../packages/machine-models/src/winding-chooser/wire-sizes.js';
import { hutHydro, relativeError, withWinding } from '../../helpers/machines.js';

const machine: Machine = {
  ...hutHydro(),
  operation: { ...hutHydro().operation, load: { kind: 'bridge', voltage: 106, diodeDrop: 0.9 } },
};
const open = { speedRpm: 420, phaseRms: 51.7, lineRms: 89.5, rectifiedMean: 121, linePeak: 127 };
const input: ChooserInput = { machine, open, ratedCurrent: 7.8, strandEddy: 16 };
const choice = chooseWinding(input);
const everyWire = choice.options.flatMap(({ turns, wires }) => wires.map((wire) => ({ turns, ...wire })));

describe('whole turns', () => {
  test("without a wish: the machine's own turns and three to either side", () => {
    expect(choice.exactTurns).toBeCloseTo(58, 10);
    expect(choice.options.map(({ turns }) => turns)).toEqual([55, 56, 57, 58, 59, 60, 61]);
    expect(choice.options[3].off).toBeCloseTo(0, 12);
  });

  test('voltage goes as turns and speed: twice the voltage at twice the speed is the same winding', () => {
    const doubled = chooseWinding({ ...input, wanted: { measure: 'rectifiedMean', voltage: 242, speedRpm: 840 } });
    expect(doubled.exactTurns).toBeCloseTo(58, 10);
    const slow = chooseWinding({ ...input, wanted: { measure: 'lineRms', voltage: 89.5, speedRpm: 210 } });
    expect(slow.exactTurns).toBeCloseTo(116, 10);
    for (const { turns, open: at, off } of slow.options) {
      expect(at.lineRms / turns).toBeCloseTo(89.5 / 116, 10);
      expect(at.phaseRms / at.lineRms).toBeCloseTo(51.7 / 89.5, 10);
      expect(off).toBeCloseTo(turns / 116 - 1, 12);
    }
  });

  test("at the cut-in speed the line's peak is the bus and two diodes", () => {
    for (const { turns, cutInRpm = Number.NaN } of choice.options) {
      expect((127 * (turns / 58) * cutInRpm) / 420).toBeCloseTo(107.8, 9);
    }
    const { load: _load, ...operation } = machine.operation;
    expect(chooseWinding({ ...input, machine: { ...machine, operation } }).options[0]).not.toHaveProperty('cutInRpm');
  });

  test('fewer turns than one there are not', () => {
    const few = chooseWinding({ ...input, wanted: { measure: 'lineRms', voltage: 1, speedRpm: 420 } });
    expect(few.options.map(({ turns }) => turns)).toEqual([1, 2, 3, 4]);
  });
});

describe('wires', () => {
  test('R goes as turns squared over the fill, for every wire of every option', () => {
    const constant = ({ turns, resistanceHot, fill }: WireChoice & { readonly turns: number }): number =>
      (resistanceHot * fill) / turns ** 2;
    const first = constant(everyWire[0]);
    expect(everyWire.length).toBeGreaterThan(50);
    for (const wire of everyWire) expect(relativeError(constant(wire), first)).toBeLessThan(1e-12);
    const own = phaseResistance(machine.winding, 16, 90) * fillFactor(machine.winding);
    expect(relativeError(first * 58 ** 2, own)).toBeLessThan(1e-12);
  });

  test('each fits, and the next thicker of its kind does not', () => {
    const leg = { width: 0.0205, thickness: 0.015 };
    const fits = (wires: number, diameter: number, overall: number): boolean =>
      (wires * (Math.PI / 4) * diameter ** 2) / (leg.width * leg.thickness) <= 0.5 &&
      wiresInLayers(overall, leg) >= wires;
    for (const { turns, strands, size } of everyWire) {
      const alike = WIRE_SIZES.filter(({ standard }) => standard === size.standard);
      const thicker = alike[alike.indexOf(size) - 1];
      expect(fits(turns * strands, size.diameter, overallDiameter(size, 'grade 2'))).toBe(true);
      if (thicker === undefined) continue;
      expect(fits(turns * strands, thicker.diameter, overallDiameter(thicker, 'grade 2'))).toBe(false);
    }
  });

  test("losses: 3 I^2 R, and strand eddy loss as turns x strands x d^4, the machine's own for its own wire", () => {
    const thin = chooseWinding({ ...input, reachableFill: fillFactor(machine.winding) * 1.0001 });
    const own = thin.options[3].wires.find(({ strands, size }) => strands === 2 && size.name === '1.180 mm');
    expect(own?.strandEddy).toBeCloseTo(16, 10);
    expect(own?.copperLoss).toBeCloseTo(3 * 7.8 ** 2 * phaseResistance(machine.winding, 16, 90), 10);
    const one = thin.options[3].wires.find(({ strands, size }) => strands === 1 && size.standard === 'metric');
    expect(relativeError(one?.strandEddy ?? 0, (16 * ((one?.size.diameter ?? 0) / 0.00118) ** 4) / 2)).toBeLessThan(
      1e-12,
    );
  });

  test("the wire suggested has the least loss; without losses, none thicker than the machine's own strand", () => {
    for (const { wires, suggested } of choice.options) {
      const least = Math.min(...wires.map(({ copperLoss = 0, strandEddy = 0 }) => copperLoss + strandEddy));
      expect((suggested?.copperLoss ?? 0) + (suggested?.strandEddy ?? 0)).toBeCloseTo(least, 10);
    }
    for (const { suggested } of chooseWinding({ machine, open }).options) {
      expect(suggested?.size.diameter).toBeLessThanOrEqual(0.00118 + 1e-9);
      expect(suggested).not.toHaveProperty('copperLoss');
    }
  });

  test('a machine of many thin strands is offered as many of them as fill the leg', () => {
    const wire = { strandArea: (Math.PI / 4) * 0.4e-3 ** 2, strands: 17, diameter: 0.4e-3, enamel: 'grade 2' };
    const { wires, suggested } = chooseWinding({ machine: withWinding(hutHydro(), { wire }), open }).options[3];
    expect(suggested?.size.diameter).toBeLessThanOrEqual(0.4e-3 + 1e-9);
    const many = Math.floor((0.5 * 0.0205 * 0.015) / (58 * wire.strandArea));
    expect(many).toBe(21);
    const counts = wires.map(({ strands }) => strands);
    expect(counts).toEqual(expect.arrayContaining([1, 6, 17, 20, 21, 22]));
    expect(counts).toEqual([...counts].sort((a, b) => a - b));
  });

  test('a tapered leg is judged at its inner end, and thicker enamel leaves less copper', () => {
    const tapered = withWinding(hutHydro(), { legShape: 'tapered' });
    const narrow = chooseWinding({ ...input, machine: tapered }).options[3].wires;
    const worst = Math.max(...narrow.map(({ fill }) => fill));
    expect(worst).toBeLessThanOrEqual((0.5 * 104.5) / 128);
    const most = (enamel: string): number => {
      const { wire } = machine.winding;
      const coated = withWinding(hutHydro(), { wire: { ...wire, enamel } });
      return Math.max(
        ...chooseWinding({ ...input, machine: coated, reachableFill: 0.7 }).options[3].wires.map(({ fill }) => fill),
      );
    };
    expect(most('grade 3')).toBeLessThan(most('grade 1'));
  });
});
