import type { Probe, Section, Setup } from '@gapwright/fem-core';
import { checkProblem, finish, InputError, probeSteps, solveProbes } from '@gapwright/fem-core';
import { triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { AIR, box } from '../../laws/sections.js';

/** A block of steel with a bar on it, a wire apart, and something that a later region covers. */
const section: Section = {
  outline: { kind: 'rectangle', from: [0, 0], to: [0.1, 0.1] },
  background: 'air',
  regions: [
    box('hidden', 0.06, 0.06, 0.01, 0.01),
    box('steel', 0.02, 0.02, 0.04, 0.02),
    box('bar', 0.03, 0.04, 0.02, 0.01),
    box('wire', 0.055, 0.055, 0.025, 0.025),
  ],
};
const setup: Setup = {
  materials: {
    air: AIR,
    hidden: AIR,
    steel: { kind: 'linear', muR: 100 },
    bar: { kind: 'linear', muR: 10 },
    wire: AIR,
  },
  current: { wire: 10 },
};

function faultsOf(check: () => unknown): readonly string[] {
  try {
    check();
  } catch (error) {
    if (error instanceof InputError) return error.faults.map(({ key, wrong }) => `${key}: ${wrong}`);
    throw error;
  }
  return [];
}

const force = (name: string, ...on: readonly string[]): Probe => ({ kind: 'force', name, on });

describe('what is refused without solving', () => {
  test('is what the solver refuses: each probe of a kind that cannot be, all of them at once', () => {
    const probes: readonly Probe[] = [
      force('apart', 'wire'),
      force('on steel', 'bar'),
      force('together', 'bar', 'steel'),
      force('gone', 'hidden'),
      { kind: 'mean', name: 'of none', over: ['hidden'] },
      { kind: 'mean', name: 'of some', over: ['hidden', 'bar'] },
      { kind: 'linkage', name: 'of none too', of: 'hidden', turns: 3 },
    ];
    const told = faultsOf(() => checkProblem(section, setup, probes));
    expect(told).toEqual([
      'bar: touches another body',
      'hidden: names no region with area',
      'probes.of none: hidden covers no area',
      'probes.of none too: hidden covers no area',
    ]);
    expect(faultsOf(() => solveProbes(section, setup, probes, { accuracy: 0.5, maxMeshes: 1 }))).toEqual(told);
  });

  test('what has not the form of a section or of a probe, and lines of more places than can be answered', () => {
    const none: unknown = undefined;
    for (const solve of [checkProblem, solveProbes]) {
      expect(faultsOf(() => solve(none as Section, setup, []))).toEqual(['section: must be an object, got nothing']);
      expect(faultsOf(() => solve(section, setup, [none as Probe]))).toEqual([
        'probes.0: must be an object, got undefined',
      ]);
      const line: Probe = { kind: 'line', name: 'l', from: [0, 0], to: [0.1, 0.1], points: 1e9 };
      expect(faultsOf(() => solve(section, setup, [line]))).toEqual([
        'probes.l: points must be a whole number from 1 to 1000000, got 1000000000',
      ]);
    }
  });

  test('a corner shared is a touch, a gap is none', () => {
    const beside = (x: number): readonly string[] => {
      const regions = [box('steel', 0.02, 0.02, 0.04, 0.02), box('bar', x, 0.04, 0.02, 0.01)];
      return faultsOf(() => checkProblem({ ...section, regions }, { materials: setup.materials }, [force('f', 'bar')]));
    };
    expect(beside(0.06)).toEqual(['bar: touches another body']);
    expect(beside(0.0601)).toEqual([]);
  });

  test('setup, edges and probes are told together', () => {
    const wrong: Setup = { ...setup, current: { wire: 1, hidden: 2 }, edges: { lift: { kind: 'crossing' } } };
    expect(faultsOf(() => checkProblem(section, wrong, [force('f', 'bar')])).map((told) => told.split(':')[0])).toEqual(
      ['current.hidden', 'edges.lift', 'bar'],
    );
  });

  test('a mesh beyond the limit that the solver has', () => {
    const fine = { ...section, maxEdge: 0.001 };
    const told = faultsOf(() => checkProblem(fine, setup, [], { maxTriangles: 4000 }));
    expect(told).toEqual([expect.stringMatching(/^background: the mesh would pass 8000 triangles/)]);
    expect(faultsOf(() => solveProbes(fine, setup, [], { maxTriangles: 4000 }))).toEqual(told);
  });
});

test('what is returned is the mesh that is solved on first', () => {
  const triangles: number[] = [];
  const steps = probeSteps(section, setup, [], { maxMeshes: 1, accuracy: 0.5 });
  finish(steps, (progress) => {
    if ('triangles' in progress) triangles.push(progress.triangles);
  });
  expect(triangles).toEqual([triangleCount(checkProblem(section, setup, []))]);
});

test('a solve tells when the equations stand, before each mesh is solved on', () => {
  const told: string[] = [];
  finish(probeSteps(section, setup, [], { maxMeshes: 2, accuracy: 1e-9 }), (progress) => {
    if ('unknowns' in progress) told.push('equations');
    else if ('step' in progress) told.push('step');
    else if ('mesh' in progress) told.push(`mesh ${progress.mesh}`);
  });
  expect(told).toEqual(['equations', 'step', 'mesh 1', 'equations', 'step', 'mesh 2']);
});
