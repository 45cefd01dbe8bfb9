import type { Field, Material } from '@gapwright/fem-core';
import { buildBHCurve, buildLocator, fluxBetween, MU0, meanOver, solveSection } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import { evaluateCurve } from '@gapwright/fem-core/materials';
import { describe, expect, test } from 'vitest';
import { circuitCases, saturationCases } from '../../packages/fem-core/src/verify/cases.js';
import type { Layer } from '../../packages/fem-core/src/verify/circuits.js';
import { seriesCircuit } from '../../packages/fem-core/src/verify/circuits.js';
import { LAW_ROWS, lawCurve } from '../../packages/fem-core/src/verify/laws.js';
import type { Table } from './bh-tables.js';
import { SHEET_470, TEAM_13 } from './bh-tables.js';
import { holdCases } from './hold-cases.js';
import { check } from './table.js';

const CIRCUIT = "Ampere's law round a one-dimensional circuit (calculated)";

const solveStrip = (layers: readonly Layer[]): Field => {
  const { section, setup } = seriesCircuit('strip', '', layers, []);
  return solveSection(section, setup);
};

/** Mean By of a layer. */
function fluxDensityOf(field: Field, layer: string): number {
  expect(field.report.converged).toBe(true);
  return meanOver(field, [layer]).by;
}

/** Mean H along y of a layer, A/m. */
function fieldStrengthOf(field: Field, layer: string): number {
  let [sum, area] = [0, 0];
  forEachSample(field, [layer], (s) => {
    sum += s.area * s.hy;
    area += s.area;
  });
  return sum / area;
}

const air: Material = { kind: 'linear', muR: 1 };
const magnetOf = (remanence: number, recoil: number): Material => ({
  kind: 'magnet',
  recoil,
  remanence: [0, remanence],
});

holdCases([...circuitCases(), ...saturationCases()]);

describe.each([
  ['TEAM 13 steel', TEAM_13, 1.02921693],
  ['sheet of 4.7 W/kg', SHEET_470, 1.03162484],
])('circuit with 200 mm of %s', (name, table, tabled) => {
  const curve = buildBHCurve(table);
  const [h, g, length, recoil] = [0.02, 0.004, 0.2, 1.05];
  const solveWith = (remanence: number): Field =>
    solveStrip([
      { name: 'magnet', thickness: h, material: magnetOf(remanence, recoil) },
      { name: 'gap', thickness: g, material: air },
      { name: 'steel', thickness: length, material: { kind: 'curve', curve } },
    ]);

  test('Br 1.25 T: flux density as with straight lines between the rows, within what smoothing moves it', () => {
    const source = 'circuit with straight-line interpolation of the table (calculated)';
    const got = fluxDensityOf(solveWith(1.25), 'gap');
    check({ case: `circuit with ${name}`, quantity: 'B in the gap', source, expected: tabled, got }, 1e-4);
  });

  test.each([3, 8, 12, 16, 20, 23, 26])('a magnet that should drive the steel to row %i of the table does', (row) => {
    const [strength, b] = table[row];
    // B (h/recoil + g)/mu0 + H length = Br h/(mu0 recoil)
    const remanence = (b * (h / recoil + g) + MU0 * strength * length) * (recoil / h);
    const field = solveWith(remanence);
    const given = { case: `circuit with ${name}`, source: CIRCUIT };
    check({ ...given, quantity: `B at row ${row}`, expected: b, got: fluxDensityOf(field, 'steel') }, 3e-5);
    check({ ...given, quantity: `H at row ${row}`, expected: strength, got: fieldStrengthOf(field, 'steel') }, 1e-4);
  });
});

describe.each([
  ['TEAM 13 steel', TEAM_13],
  ['sheet of 4.7 W/kg', SHEET_470],
])('slab of %s in a long coil: H = current per metre', (name, table) => {
  test.each([2, 5, 7, 9, 11, 14, 17, 20, 22, 25])('its flux at row %i of the table', (row) => {
    const [strength, b] = table[row];
    const [half, coil, height] = [0.004, 0.002, 0.006];
    // Half of the slab and one side of its coil; H is 0 outside a long coil, A is 0 on the slab's mid-plane.
    const edge = { kind: 'crossing' } as const;
    const field = solveSection(
      {
        outline: { kind: 'rectangle', from: [0, 0], to: [half + coil, height] },
        background: 'coil',
        regions: [{ name: 'slab', shape: { kind: 'rectangle', from: [0, 0], to: [half, height] } }],
      },
      {
        materials: { slab: { kind: 'curve', curve: buildBHCurve(table) }, coil: air },
        currentDensity: { coil: -strength / coil },
        edges: { left: { kind: 'closed' }, right: edge, top: edge, bottom: edge },
      },
      { tolerance: 1e-10 },
    );
    expect(field.report.converged).toBe(true);
    const locator = buildLocator(field.mesh);
    const got = fluxBetween(field, locator, [0, height / 2], [half, height / 2]) ?? Number.NaN;
    const source = "Ampere's law; B at that H by the table";
    const expected = b * half;
    check({ case: `slab of ${name}`, quantity: `flux at row ${row}, Wb/m`, source, expected, got }, 1e-8);
  });
});

describe('ring round a conductor: H = I/(2 pi r)', () => {
  const [wire, inner, outer] = [0.005, 0.02, 0.05];

  function solveRing(table: Table, current: number, maxEdge: number): Field {
    const area = Math.PI * wire * wire;
    return solveSection(
      {
        outline: { kind: 'circle', centre: [0, 0], radius: outer },
        background: 'ring',
        maxEdge,
        regions: [
          { name: 'window', shape: { kind: 'circle', centre: [0, 0], radius: inner }, maxEdge },
          { name: 'wire', shape: { kind: 'circle', centre: [0, 0], radius: wire }, maxEdge: wire / 4 },
        ],
      },
      {
        materials: { ring: { kind: 'curve', curve: buildBHCurve(table) }, window: air, wire: air },
        currentDensity: { wire: current / area },
        edges: { rim: { kind: 'closed' } },
      },
    );
  }

  const fluxOf = (field: Field, from: number, to: number): number => {
    expect(field.report.converged).toBe(true);
    return fluxBetween(field, buildLocator(field.mesh), [from, 0], [to, 0]) ?? Number.NaN;
  };

  test.each([
    ['TEAM 13 steel', TEAM_13],
    ['sheet of 4.7 W/kg', SHEET_470],
  ])('%s: flux by the table, through the curve that is drawn through it and with straight lines', (name, table) => {
    const curve = buildBHCurve(table);
    const smooth = (strength: number): number => {
      let [low, high] = [0, 3];
      for (let i = 0; i < 50; i++) {
        const middle = (low + high) / 2;
        if (evaluateCurve(curve, middle, { h: 0, slope: 0, energy: 0 }).h < strength) low = middle;
        else high = middle;
      }
      return low;
    };
    const straight = (strength: number): number => {
      const i = Math.max(
        1,
        table.findIndex(([h]) => h >= strength),
      );
      const [[h0, b0], [h1, b1]] = [table[i - 1], table[i]];
      return b0 + ((b1 - b0) * (strength - h0)) / (h1 - h0);
    };
    const integrate = (current: number, law: (strength: number) => number): number => {
      const steps = 4000;
      let sum = 0;
      for (let i = 0; i < steps; i++) {
        const r = inner + ((i + 0.5) * (outer - inner)) / steps;
        sum += (law(current / (2 * Math.PI * r)) * (outer - inner)) / steps;
      }
      return sum;
    };
    const given = { case: `ring of ${name}` };
    for (const current of [30, 150, 1000]) {
      const got = fluxOf(solveRing(table, current, 0.004), inner, outer);
      const quantity = `flux at ${current} A, Wb/m`;
      const source = "Ampere's law and the table, integrated over the ring (calculated)";
      check({ ...given, quantity, source, expected: integrate(current, smooth), got }, 5e-4);
      // Between the sparse rows at the foot of a table the two readings differ by percents.
      if (current < 100) continue;
      const lines = `${source}, straight lines between its rows`;
      check({ ...given, quantity, source: lines, expected: integrate(current, straight), got }, 5e-3);
    }
  });

  test('Froehlich steel: a quarter between closed radii carries the same flux as the whole ring', () => {
    const current = 60;
    const whole = fluxOf(solveRing(LAW_ROWS, current, 0.006), inner, outer);
    // Lines of force are circles; a cut along a radius is crossed at right angles.
    const edge = { kind: 'crossing' } as const;
    const corners: [number, number][] = [];
    const arc = (radius: number, from: number, to: number): void => {
      for (let i = 0; i <= 45; i++) {
        const angle = ((from + ((to - from) * i) / 45) * Math.PI) / 180;
        corners.push([radius * Math.cos(angle), radius * Math.sin(angle)]);
      }
    };
    arc(outer, 0, 90);
    arc(inner, 90, 0);
    // edge 1 ... 45 outer arc, edge 46 the cut at 90 degrees, 47 ... 91 inner arc, 92 the cut at 0 degrees
    const inside = (MU0 * current) / (2 * Math.PI);
    const potential = whole; // A drops by the flux from the inner to the outer arc
    const edges: Record<string, { kind: 'crossing' } | { kind: 'potential'; value: () => number }> = {
      'edge 46': edge,
      'edge 92': edge,
    };
    for (let i = 1; i <= 45; i++) edges[`edge ${i}`] = { kind: 'potential', value: () => 0 };
    for (let i = 47; i <= 91; i++) edges[`edge ${i}`] = { kind: 'potential', value: () => potential };
    const field = solveSection(
      { outline: { kind: 'polygon', corners }, background: 'ring', maxEdge: 0.003, regions: [] },
      { materials: { ring: { kind: 'curve', curve: lawCurve() } }, edges },
    );
    // Its H times r is the current over 2 pi everywhere.
    let [sum, area] = [0, 0];
    forEachSample(field, ['ring'], (s) => {
      sum += (s.area * (s.x * s.hy - s.y * s.hx)) / inside;
      area += s.area;
    });
    const source = "Ampere's law";
    const got = (MU0 * sum) / area;
    check({ case: 'quarter of a ring', quantity: 'H r over I/(2 pi)', source, expected: 1, got }, 1e-3);
  });
});
