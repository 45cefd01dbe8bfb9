import type { Material, Setup } from '@gapwright/fem-core';
import { InputError } from '@gapwright/fem-core';
import { buildSystem, numberUnknowns } from '@gapwright/fem-core/equations';
import { meshSection } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { checkSetup } from '../../../packages/fem-core/src/assembly/check-setup.js';
import { sources, tile } from './tile.js';

const mesh = meshSection(tile);

/** `key: code` of every fault. */
function faultsOf(check: () => unknown): readonly string[] {
  try {
    check();
  } catch (error) {
    if (error instanceof InputError) return error.faults.map(({ key, code }) => `${key}: ${code}`);
    throw error;
  }
  return [];
}

test('materials, currents and edges that cannot be are told together', () => {
  const { air: _, ...rest } = sources.materials;
  const materials: Record<string, Material> = {
    ...rest,
    bar: { kind: 'linear', muR: -1 },
    magnet: { kind: 'directed-magnet', recoil: 1, along: 1.2, direction: { angle: 0, turns: 0.5, centre: [0, 0] } },
  };
  const setup = { materials, current: { bar: Number.NaN }, currentDensity: { nowhere: 1 } };
  expect(faultsOf(() => checkSetup(mesh, setup))).toEqual([
    'air: no-material',
    'magnet: bad-form',
    'bar: no-material',
    'current.bar: not-finite',
    'currentDensity.nowhere: no-region',
  ]);
});

test('what has not the form of a setup, as plain JavaScript may hand over, is told and breaks nothing', () => {
  const fill = (bar: unknown): unknown => ({ ...sources, materials: { ...sources.materials, bar } });
  const bind = (side: unknown): unknown => ({ ...sources, edges: { left: side } });
  const magnet = { kind: 'directed-magnet', recoil: 1 };
  for (const [key, setup] of [
    ['setup', undefined],
    ['setup', null],
    ['bar', fill({ kind: 'wood' })],
    ['bar', fill({ kind: 'magnet', recoil: 1 })],
    ['bar', fill({ ...magnet, along: 1 })],
    ['bar', fill({ ...magnet, direction: { angle: 0 } })],
    ['bar', fill({ kind: 'curve' })],
    ['bar', fill({ kind: 'curve', curve: [[100, 1]] })],
    ['edges.left', bind(null)],
    ['edges.left', bind({ kind: 'wet' })],
    ['edges.left', bind({ kind: 'applied' })],
    ['edges.left', bind({ kind: 'potential', value: 1 })],
  ]) {
    expect(faultsOf(() => checkSetup(mesh, setup as Setup))).toEqual([`${key}: bad-form`]);
  }
});

test('equations are not built on materials that the setup check refuses, and on all that it lets pass', () => {
  const unknowns = numberUnknowns(mesh, sources);
  const fillings: readonly Material[] = [
    { kind: 'linear', muR: 0 },
    { kind: 'linear', muR: Infinity },
    { kind: 'magnet', recoil: 1, remanence: [Number.NaN, 0] },
    { kind: 'directed-magnet', recoil: 1, along: Infinity, direction: { angle: 0 } },
    { kind: 'directed-magnet', recoil: 1, along: 1, direction: { angle: 0, turns: 2, centre: [0, Number.NaN] } },
    { kind: 'linear', muR: 5 },
    { kind: 'directed-magnet', recoil: 1.1, along: -1, direction: { angle: 0, turns: -2, centre: [0, 0] } },
  ];
  const judged = fillings.map((bar): boolean => {
    const setup: Setup = { ...sources, materials: { ...sources.materials, bar } };
    const found = faultsOf(() => buildSystem(mesh, setup, unknowns));
    expect(found).toEqual(faultsOf(() => checkSetup(mesh, setup)));
    return found.length === 0;
  });
  expect(judged).toEqual([false, false, false, false, false, true, true]);
});
