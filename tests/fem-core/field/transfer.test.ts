import type { Field, Section } from '@gapwright/fem-core';
import { energiesOf, fieldBuffers, solveProbes } from '@gapwright/fem-core';
import { meshSection, refineMesh, solveOnMesh, triangleCount } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';

const section: Section = {
  outline: { kind: 'circle', centre: [0, 0], radius: 0.02 },
  background: 'air',
  regions: [{ name: 'bar', shape: { kind: 'rectangle', from: [-0.005, -0.004], to: [0.006, 0.004] } }],
};
const materials = {
  air: { kind: 'linear', muR: 1 },
  bar: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] },
} as const;

/** What the other side of a message gets. */
const sent = (field: Field): Field => structuredClone(field, { transfer: fieldBuffers(field) });

test('a field moved to another place is the same there, and gone here', () => {
  const { field } = solveOnMesh(meshSection(section), { materials });
  const { energy } = energiesOf(field);
  const triangles = triangleCount(field.mesh);
  const there = sent(field);
  expect(energiesOf(there).energy).toBe(energy);
  expect(triangleCount(there.mesh)).toBe(triangles);
  expect([field.potential.length, field.mesh.xy.length, field.mesh.triangles.length]).toEqual([0, 0, 0]);
  expect(materials.bar.remanence).toEqual([0, 1.2]);
});

test('every array of a mesh, refined or not, is whole: none is a view of something larger', () => {
  const mesh = meshSection(section);
  const finer = refineMesh(mesh, new Float64Array(triangleCount(mesh)).fill(0.004));
  for (const one of [mesh, finer]) {
    const { field } = solveOnMesh(one, { materials });
    expect(fieldBuffers(field).length).toBeGreaterThan(10);
  }
  const answer = solveProbes(section, { materials }, [], { accuracy: 0.01 });
  expect(fieldBuffers(answer.field, answer.recovered)).toContain(answer.recovered.buffer);
});

test('a view of a larger buffer is refused: sending it would empty its neighbours', () => {
  const { field } = solveOnMesh(meshSection(section), { materials });
  expect(() => fieldBuffers(field, new Float64Array(4).subarray(1))).toThrow('view of a larger buffer');
});
