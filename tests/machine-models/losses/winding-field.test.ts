import { buildLocator, valueAt } from '@gapwright/fem-core';
import { nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { waveSquares, windingField } from '../../../packages/machine-models/src/losses/winding-field.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import type { SolvedSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';
import { keeperHydro } from '../slices/variants.js';

const slice = { radius: 0.128, weight: 0.055 };
/** Cut along the magnet's axis alone, so that both halves of the winding are in the mesh. */
const cuts = { magnetAxis: true, midPlane: false };
const machines = [
  ['twin discs', hutHydro()],
  ['keeper', keeperHydro()],
] as const;

/** Places across half a pole, and heights over the winding's whole thickness with their weights. */
const STATIONS = 480;
const levels = (thickness: number) => {
  const { at, weight } = gaussPoints(8);
  return at.map((x, i) => ({ y: (x * thickness) / 2, weight: weight[i] / 2 }));
};

function sampleAt({ field, pole, recovered: gradient }: SolvedSlice, thickness: number) {
  const locator = buildLocator(field.mesh);
  return levels(thickness).map(({ y, weight }) => ({
    weight,
    values: Array.from({ length: STATIONS }, (_, i) => {
      const x = ((i + 0.5) * pole.polePitch) / (2 * STATIONS);
      const value = valueAt(field, locator, x, y, gradient);
      if (value === undefined) throw new Error('outside');
      return { x, bx: value.bx, by: value.by };
    }),
  }));
}

describe.each(machines)('%s', (_, machine) => {
  const solved = solveSlice(machine, slice, { cuts, accuracy: 5e-4 });
  const { thickness } = machine.winding;
  const found = windingField(machine, solved);
  const squares = waveSquares(found);
  const samples = sampleAt(solved, thickness);

  test('squares of both components are those of the field itself, order by order', () => {
    const total = squares.axial[0] + squares.tangential[0];
    [1, 3, 5].forEach((n, i) => {
      let [axial, tangential] = [0, 0];
      for (const { weight, values } of samples) {
        let [c, s] = [0, 0];
        for (const { x, bx, by } of values) {
          c += (2 / STATIONS) * by * Math.cos((n * Math.PI * x) / solved.pole.polePitch);
          s += (2 / STATIONS) * bx * Math.sin((n * Math.PI * x) / solved.pole.polePitch);
        }
        axial += weight * c * c;
        tangential += weight * s * s;
      }
      expect(Math.abs(squares.axial[i] - axial)).toBeLessThan(2e-3 * total);
      expect(Math.abs(squares.tangential[i] - tangential)).toBeLessThan(2e-3 * total);
    });
  });

  test('mean square of how fast B changes along the circumference, by differences of the field, is that of all orders', () => {
    const k = Math.PI / solved.pole.polePitch;
    const expected = squares.order.reduce(
      (sum, n, i) => sum + ((n * k) ** 2 * (squares.axial[i] + squares.tangential[i])) / 2,
      0,
    );
    let got = 0;
    const step = solved.pole.polePitch / (2 * STATIONS);
    const apart = 8; // differences over less than this tell the mesh's grain
    for (const { weight, values } of samples) {
      let sum = 0;
      for (let i = 0; i < STATIONS; i++) {
        const a = values[i];
        // Midway between poles Bx mirrors itself and By turns round.
        const b = i + apart < STATIONS ? values[i + apart] : values[2 * STATIONS - 1 - i - apart];
        const by = i + apart < STATIONS ? b.by : -b.by;
        sum += ((b.bx - a.bx) ** 2 + (by - a.by) ** 2) / (apart * step) ** 2;
      }
      got += (weight * sum) / STATIONS;
    }
    expect(relativeError(got, expected)).toBeLessThan(0.012);
  });

  test('orders rise and are odd; the fundamental stands out', () => {
    expect(found.order.slice(0, 3)).toEqual([1, 3, 5]);
    expect(found.order.length).toBe(found.axial.length);
    expect(Math.abs(found.axial[0])).toBeGreaterThan(3 * Math.abs(found.axial[1]));
  });
});

test('a made field comes back as put in, its even and its odd part', () => {
  const machine = keeperHydro();
  const solved = solveSlice(machine, slice, { cuts, accuracy: 0.05 });
  const { mesh } = solved.field;
  const even = [0.5, -0.1, 0.02];
  const odd = [0.2, 0.05, -0.01];
  const k = Math.PI / solved.pole.polePitch;
  const a = (x: number, y: number): number =>
    even.reduce((sum, p, i) => {
      const q = (2 * i + 1) * k;
      return sum - ((p * Math.cosh(q * y) + odd[i] * Math.sinh(q * y)) * Math.sin(q * x)) / q;
    }, 0);
  const potential = Float64Array.from({ length: nodeCount(mesh) }, (_, i) => a(...nodePoint(mesh, i)));
  const made: SolvedSlice = {
    ...solved,
    answer: { ...solved.answer, windingB: { order: [], amplitude: [] } },
    field: { ...solved.field, potential },
  };
  const { axial, tangential } = windingField(machine, made);
  even.forEach((p, i) => {
    const e = ((2 * i + 1) * k * machine.winding.thickness) / 2;
    expect(Math.abs(axial[i] - (p * Math.sinh(e)) / e)).toBeLessThan(2e-4);
    expect(Math.abs(tangential[i] - (odd[i] * Math.sinh(e)) / e)).toBeLessThan(2e-4);
  });
});

test('twin discs have no odd part, cut along the mid-plane or not', () => {
  const machine = hutHydro();
  expect(windingField(machine, solveSlice(machine, slice)).tangential.every((value) => value === 0)).toBe(true);
  const whole = windingField(machine, solveSlice(machine, slice, { cuts }));
  for (const value of whole.tangential) expect(Math.abs(value)).toBeLessThan(1e-3 * whole.axial[0]);
});

test('a thin winding has the mid-plane square; one that lies even sees as much along as across far from it', () => {
  const made = (thickness: number) => ({
    radius: 1,
    weight: 1,
    polePitch: 0.05,
    thickness,
    order: [1],
    axial: [1],
    tangential: [0],
  });
  const thin = waveSquares(made(1e-6));
  expect(thin.axial[0]).toBeCloseTo(1, 9);
  expect(thin.tangential[0]).toBeCloseTo(0, 9);
  const thick = waveSquares(made(1));
  expect(relativeError(thick.axial[0], thick.tangential[0])).toBeLessThan(1e-9);
});
