import { MU0, solveProbes } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { solverOptions } from '../../../packages/machine-models/src/section-file/check-section.js';
import { describeSection } from '../../../packages/machine-models/src/section-file/describe-section.js';
import type { SectionResult } from '../../../packages/machine-models/src/section-file/section-result.js';
import { readYoke } from './yoke.js';

/** A round conductor of radius a in a closed tube of radius b. */
const [a, b, amperes] = [0.01, 0.04, 100];
const COAXIAL = `format: gapwright-section/1
outline: { circle: { centre: [0 mm, 0 mm], radius: 40 mm } }
background: air
regions:
  - { name: bar, material: copper, shape: { circle: { centre: [0 mm, 0 mm], radius: 10 mm } }, current: 100 A }
probes:
  - { name: linkage, linkage_of: bar }
`;
/** Mean of A over the bar: mu0 I/(2 pi) (ln(b/a) + 1/4). */
const linkage = ((MU0 * amperes) / (2 * Math.PI)) * (Math.log(b / a) + 1 / 4);

function solve(...settings: readonly string[]): SectionResult {
  const { problem, warnings } = readYoke(settings, COAXIAL);
  const { section, setup, probes } = problem;
  const answer = solveProbes(section, setup, probes, solverOptions(problem));
  return describeSection(problem, answer, warnings, { version: '0', inputSha256: '' });
}

const figuresOf = ({ probes }: SectionResult): { readonly error: number; readonly told: number } => {
  const [probe] = probes;
  if (probe.kind !== 'linkage_of') throw new Error('the probe is a linkage');
  return { error: Math.abs(probe.linkage_Wb_per_m / linkage - 1), told: probe.linkage_Wb_per_m_rel_err };
};

/** One mesh of edges as long as told, in mm. */
const onMesh = (elements: string, edge: number) =>
  figuresOf(
    solve(`model={elements: ${elements}, max_meshes: 1}`, `max_edge=${edge} mm`, `regions.0.max_edge=${edge} mm`),
  );

test('linear elements come nearer with the square of the edge, quadratic ones with more', () => {
  const order = (elements: string): number =>
    Math.log(onMesh(elements, 6).error / onMesh(elements, 2).error) / Math.log(3);
  expect(order('linear')).toBeGreaterThan(1.7);
  expect(order('linear')).toBeLessThan(2.5);
  expect(order('quadratic')).toBeGreaterThan(2.8);
});

test('on one mesh linear elements are farther off, say so, and keep within what they say', () => {
  for (const edge of [3, 2]) {
    const [linear, quadratic] = [onMesh('linear', edge), onMesh('quadratic', edge)];
    expect(linear.error).toBeGreaterThan(quadratic.error);
    expect(linear.told).toBeGreaterThan(2 * quadratic.told);
    expect(linear.error).toBeLessThan(linear.told);
  }
});

test('a wanted accuracy is reached with either, with more triangles where they are linear', () => {
  const [linear, quadratic] = ['linear', 'quadratic'].map((elements) =>
    solve(`model={elements: ${elements}, accuracy: 1 %}`),
  );
  for (const result of [linear, quadratic]) {
    expect(result.accurate).toBe(true);
    expect(figuresOf(result).error).toBeLessThan(0.01);
  }
  expect(linear.mesh.triangles).toBeGreaterThan(2 * quadratic.mesh.triangles);
  expect([linear.elements, quadratic.elements]).toEqual(['linear', 'quadratic']);
});

test('elements are quadratic where nothing is said', () => {
  expect(solverOptions(readYoke().problem).order).toBe(2);
  expect(solverOptions(readYoke(['model.elements=linear']).problem).order).toBe(1);
});
