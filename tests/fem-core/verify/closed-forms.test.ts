import { MU0 } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { verificationCases } from '../../../packages/fem-core/src/verify/cases.js';
import { circuitFluxDensity, steelCircuitFluxDensity } from '../../../packages/fem-core/src/verify/circuits.js';
import { barField, barPotential } from '../../../packages/fem-core/src/verify/conductors.js';
import {
  G1,
  G2,
  G3,
  G4,
  seriesAmplitude,
  seriesAmplitudeInMagnet,
  seriesFlux,
  seriesPull,
} from '../../../packages/fem-core/src/verify/double-disc.js';
import { ARRAY, halbachAmplitude, segmentShare } from '../../../packages/fem-core/src/verify/halbach.js';
import {
  energyDensityAt,
  fieldStrengthAt,
  fluxDensityAt,
  integrate,
} from '../../../packages/fem-core/src/verify/laws.js';
import { BLOCK, blockField, blockPotential, facingPull } from '../../../packages/fem-core/src/verify/magnets-in-air.js';
import { carterDip, carterFactor, carterGamma } from '../../../packages/fem-core/src/verify/slots.js';

const CASES = verificationCases();

/** What the cases expect. */
function expectedOf(name: string, quantity: string): number {
  const figure = CASES.find((one) => one.name === name)?.figures.find((one) => one.quantity === quantity);
  if (figure === undefined) throw new Error(`no figure ${quantity} of ${name}`);
  return figure.expected;
}

/** Equal to all the digits that are printed. */
function expectPrinted(got: number, printed: number, digits = 9): void {
  expect(Math.abs(got - printed)).toBeLessThanOrEqual(
    0.51 * 10 ** (1 - digits) * 10 ** Math.floor(Math.log10(Math.abs(printed))),
  );
}

// Figures tabled by a second program.
test.each([
  ['round conductor', 'A at the centre, Wb/m', 5.60517019e-6],
  ['round conductor', 'A at 1 mm, Wb/m', 5.35517019e-6],
  ['round conductor', 'A at 4 mm, Wb/m', 3.21887582e-6],
  ['round conductor', 'A at 10 mm, Wb/m', 1.38629436e-6],
  ['round conductor', 'B at 1 mm, T', 5e-4],
  ['round conductor', 'B at 10 mm, T', 2e-4],
  ['round conductor', 'inductance by linkage, H/m', 5.10517019e-7],
  ['two-wire line', 'inductance by linkage, H/m', 1.02103404e-6],
  ['two like currents', 'force on the left wire, N/m', 1e-3],
  ['busbar', 'By at (10, 0) mm, T', 4.4547859e-3],
  ['busbar', 'By at (5, 0) mm, T', 5.32116908e-3],
  ['busbar', 'Bx at (0, 30) mm, T', -3.14446522e-3],
  ['busbar', 'Bx at (20, 25) mm, T', -1.76129608e-3],
  ['busbar', 'By at (20, 25) mm, T', 1.80820234e-3],
  ['busbar', 'Bx at (2, 10) mm, T', -2.10136091e-3],
  ['busbar', 'By at (2, 10) mm, T', 2.01379787e-3],
  ['busbar in unbounded air', 'By at (500, 0) mm, T', 1.59920065e-4],
  ['cylinder of mu_r 1.05 in a uniform field', 'B inside, T', 0.102439024],
  ['cylinder of mu_r 1.05 in a uniform field', 'B at 2 R on the axis, T', 0.100609756],
  ['cylinder of mu_r 1.05 in a uniform field', 'B at 2 R across it, T', 0.0993902439],
  ['cylinder of mu_r 10 in a uniform field', 'B inside, T', 0.181818182],
  ['cylinder of mu_r 10 in a uniform field', 'B at 2 R on the axis, T', 0.120454545],
  ['cylinder of mu_r 10 in a uniform field', 'B at 2 R across it, T', 0.0795454545],
  ['cylinder of mu_r 1000 in a uniform field', 'B inside, T', 0.1998002],
  ['cylinder of mu_r 1000 in a uniform field', 'B at 2 R on the axis, T', 0.12495005],
  ['cylinder of mu_r 1000 in a uniform field', 'B at 2 R across it, T', 0.07504995],
  ['shell of mu_r 100 in a uniform field', 'B in the hole, T', 0.0101823662],
  ['shell of mu_r 1000 in a uniform field', 'B in the hole, T', 0.00110107797],
  ['magnetised cylinder in air, recoil 1.05', 'B inside, T', 0.585365854],
  ['rectangular magnet in air', 'By at (0, 0) mm, T', 0.256040956],
  ['rectangular magnet in air', 'By at (0, 10) mm, T', 0.184479522],
  ['rectangular magnet in air', 'By at (0, 15) mm, T', 0.135000242],
  ['rectangular magnet in air', 'Bx at (15, 10) mm, T', 0.199090897],
  ['rectangular magnet in air', 'By at (15, 10) mm, T', 0.0593844756],
  ['rectangular magnet in air', 'Bx at (20, 12) mm, T', 0.126601221],
  ['rectangular magnet in air', 'By at (20, 12) mm, T', -0.0158040345],
  ['rectangular magnet in air', 'By at (25, 0) mm, T', -0.135000242],
  ['two magnets facing', 'By at (0, 0) mm, T', 0.3478639],
  ['two magnets facing', 'By at (10, 0) mm, T', 0.288715668],
  ['two magnets facing', 'By at (15, 0) mm, T', 0.116406628],
  ['two magnets facing', 'By at (20, 0) mm, T', -0.0528607895],
  ['magnet pair between iron plates', 'By at the centre, T', 0.741824569],
  ['Halbach array, evenly turning', 'B_1 5 mm above, T', 0.641837981],
  ['Halbach array of four blocks a wave', 'B_1 5 mm above, T', 0.577857206],
  ['Halbach array of four blocks a wave', 'B_5 5 mm above, T', 0.0303181372],
  ['Halbach array of four blocks a wave', 'B_3 5 mm below, T', 0.109874005],
  ['Halbach array of four blocks a wave', 'B_7 5 mm below, T', 0.0098773793],
  ['circuit of 20 mm magnet, 16 mm gap', 'B, T', 0.679347826],
  ['circuit of 40 mm magnet, 14 mm gap', 'B, T', 0.281588448],
  ['circuit with iron of mu_r 1000', 'B, T', 0.67549311],
  ['slot of 3 mm at a gap of 1 mm', 'k_C by energy', 1.10361498],
  ['slot of 3 mm at a gap of 1 mm', 'B on the smooth face under the slot, T', 0.554700196],
  ['slot of 8 mm at a gap of 1 mm', 'k_C by energy', 1.32878484],
  ['slot of 8 mm at a gap of 1 mm', 'B on the smooth face under the slot, T', 0.242535625],
  ['disc machine G1', 'flux per pole, y = 0, Wb/m', 0.0218193662],
  ['disc machine G2', 'flux per pole, y = 0, Wb/m', 0.0126990906],
  ['disc machine G3, ferrite', 'flux per pole, y = 0, Wb/m', 0.0124875335],
  ['disc machine G4, plain disc', 'flux per pole, y = 0, Wb/m', 0.0201881153],
] as const)('%s, %s is the printed figure', (name, quantity, printed) => {
  expectPrinted(expectedOf(name, quantity), printed, 8);
});

test.each([
  ['disc machine G1', [0.680191, -0.0278849, -0.01476], 0.6428581, 0.0240501, 0.0270893],
  ['disc machine G2', [0.6697553, 0, -0.0206809], 0.6539725, 0.0139011, 0.0154814],
  ['disc machine G3, ferrite', [0.2591203, 0.0289748, -0.0235307], 0.2678537, 0.0126448, 0.0134026],
] as const)('%s: harmonics, axis, magnet face and disc as printed', (name, amplitudes, axis, atFace, atDisc) => {
  for (const [i, n] of [1, 3, 5].entries()) {
    expect(Math.abs(expectedOf(name, `B_${n} at y = 0, T`) - amplitudes[i])).toBeLessThan(6e-8);
  }
  expectPrinted(expectedOf(name, 'By on the axis at y = 0, T'), axis, 7);
  expect(Math.abs(expectedOf(name, 'flux per pole, magnet face, Wb/m') - atFace)).toBeLessThan(6e-8);
  expect(Math.abs(expectedOf(name, 'flux per pole, disc, Wb/m') - atDisc)).toBeLessThan(1e-7);
});

test.each([
  ['G1', G1, 4612.51],
  ['G2', G2, 2679.93],
  ['G3', G3, 1091.11],
  ['G4', G4, 3946.74],
] as const)('pull of %s as printed', (_, g, pull) => {
  expectPrinted(seriesPull(g), pull, 6);
});

describe('formulas agree with each other', () => {
  test("the disc machine's series: gap and magnet layer meet at the magnet's face but for the magnetisation's jump", () => {
    for (const g of [G1, G2, G3, G4]) {
      for (const n of [1, 3, 5, 21]) {
        expect(seriesAmplitudeInMagnet(g, n, g.height)).toBeCloseTo(seriesAmplitude(g, n, g.halfGap), 12);
      }
      expect(seriesFlux(g, g.halfGap + 1e-12)).toBeCloseTo(seriesFlux(g, g.halfGap), 9);
    }
  });

  test.each([
    ['bar', barField, barPotential, { width: 0.01, height: 0.04, density: 1e6 }],
    ['block', blockField, blockPotential, BLOCK],
  ] as const)("%s: B is the curl of A, inside, outside and on the corners' lines", (_, field, potential, body) => {
    const [b, a] = [
      field as (body: unknown, x: number, y: number) => readonly [number, number],
      potential as (body: unknown, x: number, y: number) => number,
    ];
    const h = 1e-6;
    for (const [x, y] of [
      [0.0012, 0.0007],
      [-0.003, 0.004],
      [0.02, 0.012],
      [-0.035, -0.025],
    ]) {
      const [bx, by] = b(body, x, y);
      expect((a(body, x, y + h) - a(body, x, y - h)) / (2 * h)).toBeCloseTo(bx, 6);
      // Within the block A jumps nowhere, and B there is that of the sheets: mu0 H + Br.
      expect((a(body, x - h, y) - a(body, x + h, y)) / (2 * h)).toBeCloseTo(by, 6);
    }
  });

  test('far apart, two blocks pull each other as two dipoles do', () => {
    // The moment of a block is Br w h/mu0 per metre; one dipole pulls the other by mu0 m^2/(pi d^3).
    const moment = (BLOCK.remanence * BLOCK.width * BLOCK.height) / MU0;
    const distance = 1;
    const dipoles = (MU0 * moment ** 2) / (Math.PI * distance ** 3);
    expect(facingPull(BLOCK, distance - BLOCK.height) / dipoles).toBeCloseTo(1, 2);
  });

  test('share that blocks leave of the evenly turning array as printed', () => {
    for (const [blocks, share] of [
      [4, 0.900316316],
      [6, 0.954929659],
      [8, 0.974495358],
      [12, 0.988615929],
      [16, 0.993586851],
    ]) {
      expectPrinted(segmentShare(1, blocks), share);
    }
    expectPrinted(halbachAmplitude(ARRAY, 1, 0.005) * segmentShare(1, 6), 0.612910124);
  });

  test("Carter's coefficient as printed, also where the gap is as wide as the slot", () => {
    expectPrinted(carterGamma(0.002, 0.002), 0.153109638);
    expectPrinted(carterFactor(0.002, 0.002, 0.01), 1.03158925);
    expectPrinted(carterDip(0.002, 0.002), 0.894427191);
  });

  test('circuits: a steel that needs no field is ideal iron', () => {
    expectPrinted(circuitFluxDensity(1.25, 1.05, 0.01, 0.009), 0.642673522);
    expectPrinted(circuitFluxDensity(1.25, 1.05, 0.02, 0.004), 1.03305785);
    expectPrinted(
      steelCircuitFluxDensity(1.25, 1.05, 0.02, 0.004, 0.2, () => 0),
      1.03305785,
    );
  });

  test('the steel in closed form: H(B) inverts B(H), the energy is the integral of H dB', () => {
    for (const h of [0, 1, 100, 2500, 1e5, 1e6]) expect(fieldStrengthAt(fluxDensityAt(h))).toBeCloseTo(h, 4);
    for (const h of [50, 400, 2e4]) {
      const sum = integrate(fieldStrengthAt, 0, fluxDensityAt(h), 20_000);
      expect(sum / energyDensityAt(h)).toBeCloseTo(1, 6);
    }
  });
});

test('cases are told apart by name, figures of a case by quantity; every one names formula and source', () => {
  const names = CASES.map(({ name }) => name);
  expect(new Set(names).size).toBe(names.length);
  for (const { figures, formula, source } of CASES) {
    expect(new Set(figures.map(({ quantity }) => quantity)).size).toBe(figures.length);
    expect(formula).not.toBe('');
    expect(source).toMatch(/comput|memory/);
  }
});
