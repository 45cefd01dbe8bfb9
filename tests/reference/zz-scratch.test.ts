import { solveAdaptively, weightedFlux, regionAreas, solveOnMesh, meshSection, estimateGoalErrors, applyFunctional } from '@gapwright/fem-core';
import type { Setup, Section } from '@gapwright/fem-core';
import { test } from 'vitest';
test('sweep', () => {
  for (const muR of [1.05, 10, 1000]) for (const div of [1, 2, 4, 8, 16, 32]) {
    const [b0, radius, rim] = [0.1, 0.01, 0.025];
    const k = (muR - 1) / (muR + 1);
    const setup: Setup = { materials: { c: { kind: 'linear', muR }, air: { kind: 'linear', muR: 1 } }, edges: { rim: { kind: 'potential', value: (x, y) => b0 * y * (1 + (k * radius ** 2) / (x * x + y * y)) } } };
    const section: Section = { outline: { kind: 'circle', centre: [0, 0], radius: rim }, background: 'air', maxEdge: rim / div, regions: [{ name: 'c', shape: { kind: 'circle', centre: [0, 0], radius }, maxEdge: radius / div }] };
    const mesh = meshSection(section);
    const s = solveOnMesh(mesh, setup);
    const g = weightedFlux(mesh, ['c'], () => [1 / (Math.PI * radius ** 2), 0]);
    const e = estimateGoalErrors(s.system, s.field, s.factor!, [g]);
    const exact = (2 * muR * b0) / (muR + 1);
    const err = (applyFunctional(g, s.field.potential) - exact) / exact;
    const area = regionAreas(mesh)[1] / (Math.PI * radius ** 2) - 1;
    console.log(muR, div, mesh.triangles.length / 3, 'err', err.toExponential(2), 'bound', (e.bounds[0] / exact).toExponential(2), 'ratio', (e.bounds[0] / exact / Math.abs(err)).toFixed(2), 'area', area.toExponential(2), 'without area', (e.bounds[0] / exact / Math.abs(err - area)).toFixed(2));
  }
}, 600000);
