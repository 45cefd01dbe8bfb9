import { describe, expect, test } from 'vitest';
import { COPPER_RESISTIVITY_20C, copperResistivity } from '../../../packages/machine-models/src/winding/copper.js';
import {
  copperMass,
  fillFactor,
  meanTurn,
  phaseResistance,
  wireLength,
} from '../../../packages/machine-models/src/winding/turn.js';
import { hutHydro, type Overlapped, overlappedHydro, relativeError } from '../../helpers/machines.js';

describe('copper', () => {
  // Round wire: bare diameter (mm), ohm per metre at 20 degC.
  // W2 [READ]: catalogue of a wire maker, 2021, by IEC 60317-0-1, as printed.
  const catalogue = [
    [0.404, 0.134496],
    [0.361, 0.168445],
    [0.32, 0.214374],
    [0.287, 0.266507],
    [0.28, 0.280005],
    [0.254, 0.340255],
    [0.226, 0.429789],
    [0.203, 0.532697],
    [0.18, 0.677528],
    [0.16, 0.857497],
    [0.142, 1.088669],
    [0.127, 1.361022],
  ];
  // W1, W3 [CALC]: nominal diameters of IEC 60317-0-1 and of AWG 8, 14, 18, 25 with rho20 = 1/58e6 ohm m (IEC 60028).
  const standard = [
    [0.2, 0.5488101],
    [0.5, 0.08780962],
    [1, 0.02195241],
    [1.32, 0.01259895],
    [2, 0.005488101],
    [2.8, 0.002800052],
    [3.263643, 0.002060994],
    [1.627727, 0.008285509],
    [1.023687, 0.02094824],
    [0.4546661, 0.1061933],
  ];

  test.each(catalogue)('%f mm round wire has the %f ohm/m of the catalogue', (diameter, expected) => {
    const section = (Math.PI / 4) * (diameter / 1000) ** 2;
    expect(relativeError(COPPER_RESISTIVITY_20C / section, expected)).toBeLessThan(2.5e-5);
  });

  test.each(standard)('%f mm round wire has the %f ohm/m of the standard', (diameter, expected) => {
    const section = (Math.PI / 4) * (diameter / 1000) ** 2;
    expect(relativeError(COPPER_RESISTIVITY_20C / section, expected)).toBeLessThan(1e-6);
  });

  test('resistivity rises by 0.00393 per kelvin of its value at 20 degC (IEC 60028 [MEM], digits [CALC])', () => {
    expect(copperResistivity(20)).toBeCloseTo(1.72413793e-8, 16);
    expect(copperResistivity(75)).toBeCloseTo(2.09681034e-8, 16);
    expect(copperResistivity(100)).toBeCloseTo(2.2662069e-8, 16);
    expect(copperResistivity(120)).toBeCloseTo(2.40172414e-8, 16);
  });
});

describe('hut hydro', () => {
  const { winding } = hutHydro();

  test('mean turn about 0.202 m and 0.370 ohm a phase [CALC]', () => {
    expect(meanTurn(winding, 16)).toBeCloseTo(0.202, 3);
    expect(phaseResistance(winding, 16, 20)).toBeCloseTo(0.37, 3);
  });

  test('fill factor 0.41: 58 turns of 2.19 mm2 in 20.5 x 15 mm [CALC]', () => {
    expect(fillFactor(winding)).toBeCloseTo(0.41, 2);
  });

  test('a conductor of 1 mm2 weighs 8.89 kg per kilometre (IEC 60028 [MEM])', () => {
    const thin = { ...winding, wire: { strandArea: 0.5e-6, strands: 2 } };
    expect(copperMass(thin, 16) / (wireLength(thin, 16) / 1000)).toBeCloseTo(8.89, 10);
  });

  test('two paths of half the length side by side: a quarter of the resistance, the same copper', () => {
    const parallel = { ...winding, paths: 2 };
    expect(phaseResistance(parallel, 16, 90)).toBeCloseTo(phaseResistance(winding, 16, 90) / 4, 12);
    expect(copperMass(parallel, 16)).toBe(copperMass(winding, 16));
  });

  test('strands in hand divide the resistance and leave the length of one strand', () => {
    const many = { ...winding, wire: { ...winding.wire, strands: 6 } };
    expect(phaseResistance(many, 16, 20)).toBeCloseTo(phaseResistance(winding, 16, 20) / 3, 12);
    expect(wireLength(many, 16)).toBe(wireLength(winding, 16));
  });

  test('a square opening with a leg of no width has its perimeter for a turn', () => {
    const square = { innerRadius: 0.1, outerRadius: 0.14, innerWidth: 0.04, outerWidth: 0.04 };
    expect(meanTurn({ ...winding, legWidth: 0, opening: square }, 16)).toBeCloseTo(0.16, 12);
  });
});

describe('a 40-pole wave winding with legs from 140 to 180 mm (public notes on a coreless pulse generator, 2018 [READ])', () => {
  // Ten conductors per leg; the notes have one phase per stator, which changes no turn: 20 coils of two legs each.
  const winding: Overlapped = {
    ...overlappedHydro().winding,
    coils: 60,
    turns: 10,
    legs: { innerRadius: 0.14, outerRadius: 0.18 },
    wire: { strandArea: 6.1023e-6, strands: 1 },
  };

  test('one turn round the machine is 40 legs and both rims: 2.605310 m [CALC]', () => {
    expect(20 * meanTurn(winding, 40)).toBeCloseTo(2.60531, 6);
  });

  test('resistance within 15 % of the mean measured 82.37 milliohm', () => {
    expect(relativeError(phaseResistance(winding, 40, 20), 0.08237)).toBeLessThan(0.15);
  });

  test('the build of the ends does not change the turn: what the outer arc gains the inner loses', () => {
    expect(meanTurn({ ...winding, legWidth: 2 * winding.legWidth }, 40)).toBeCloseTo(meanTurn(winding, 40), 12);
  });
});
