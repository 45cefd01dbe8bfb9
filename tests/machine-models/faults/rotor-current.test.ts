import { describe, expect, test } from 'vitest';
import { shortCircuitPath } from '../../../packages/machine-models/src/faults/rotor-current.js';
import { shortCircuit } from '../../../packages/machine-models/src/faults/short-circuit.js';
import { evaluate } from '../../../packages/machine-models/src/waves/series.js';
import { phaseLags } from '../../../packages/machine-models/src/winding/coil-places.js';
import { integrate, shorted } from './shorted.js';

const W = (8 * 2 * Math.PI * 420) / 60;

test('the steady state is the phase currents: -direct cos(theta) + quadrature sin(theta), the others behind', () => {
  const machine = shorted();
  const steady = shortCircuitPath(machine, 600).at(-1);
  const { currents } = shortCircuit(machine, 600);
  phaseLags(3).forEach((lag, k) => {
    for (const theta of [0.3, 1.7, 4]) {
      const seen = -(steady?.direct ?? 0) * Math.cos(theta - lag) + (steady?.quadrature ?? 0) * Math.sin(theta - lag);
      const current = currents[k];
      expect(seen).toBeCloseTo(current === undefined ? Number.NaN : evaluate(current, theta), 9);
    }
  });
});

describe('after joining the terminals', () => {
  test.each([0, 1, 2.5])('from the angle %f on: the three phases by fine steps in time, seen by the rotor', (start) => {
    const [resistance, henry] = [0.2, 0.78e-3];
    const path = shortCircuitPath(shorted({ resistance, inductance: henry }), 420);
    const peak = 51.7 * Math.SQRT2;
    const phases = phaseLags(3).map((lag) =>
      integrate((theta) => peak * Math.sin(theta - lag), { resistance, henry, w: W }, start, 1, 360),
    );
    path.slice(0, -1).forEach(({ direct, quadrature }, i) => {
      const step = (360 / (path.length - 1)) * (i + 1);
      const theta = start + (2 * Math.PI * step) / 360;
      const seen = (shape: (angle: number) => number): number =>
        (2 / 3) * phaseLags(3).reduce((sum, lag, k) => sum + (phases[k]?.[step] ?? 0) * shape(theta - lag), 0);
      expect(Math.abs(direct + seen(Math.cos))).toBeLessThan(1e-5 * peak);
      expect(Math.abs(quadrature - seen(Math.sin))).toBeLessThan(1e-5 * peak);
    });
  });

  test('without resistance the magnets bear twice the steady current half a period after', () => {
    const path = shortCircuitPath(shorted({ resistance: 1e-9 }), 420);
    const steady = path.at(-1)?.direct ?? 0;
    expect(Math.max(...path.map(({ direct }) => direct)) / steady).toBeCloseTo(2, 6);
    expect((path[path.length / 2 - 1.5]?.direct ?? 0) / steady).toBeCloseTo(2, 6);
  });

  test('without inductance it brakes at once and weakens no magnet', () => {
    for (const { direct, quadrature } of shortCircuitPath(shorted({ inductance: 0 }), 420)) {
      expect(direct).toBe(0);
      expect(quadrature).toBeCloseTo((51.7 * Math.SQRT2) / 0.535, 9);
    }
  });
});
