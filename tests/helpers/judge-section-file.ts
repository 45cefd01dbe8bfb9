import { finish, formatFault, InputError, probeSteps, type SectionAnswer } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { describeSection, readSection, type SectionReadResult, type SectionResult } from '@gapwright/machine-models';
import { expect } from 'vitest';

/** What became of a file: solved, solved but not as accurate as wanted, or refused with the codes of its faults. */
export type Outcome = 'accurate' | 'not reached' | { readonly refused: readonly string[] };

/** The outcome of many files, and the slowest of them. */
export interface Tally {
  readonly counts: Map<string, number>;
  slowest: { ms: number; text: string };
}

export const newTally = (): Tally => ({ counts: new Map(), slowest: { ms: 0, text: '' } });

/** Limits that keep one case small, however much the file asks for. */
const LIMITS = { accuracy: 0.05, maxTriangles: 3000 } as const;

/** No single case takes anywhere near this; one that does hangs. */
const HANG_MS = 20_000;

/**
 * Reads and solves a text as the command does. Anything but an answer or faults with places fails, as do answers that are
 * said to be accurate and are no numbers, and negative energies. Tallies the code of the first fault.
 */
export function judgeSectionFile(text: string, tally: Tally, maxMeshes = 2): Outcome {
  const begun = performance.now();
  const outcome = judge(text, maxMeshes);
  const ms = performance.now() - begun;
  expect(ms).toBeLessThan(HANG_MS); // a hang, not a benchmark
  if (ms > tally.slowest.ms) tally.slowest = { ms, text };
  const key = typeof outcome === 'string' ? outcome : outcome.refused[0];
  tally.counts.set(key, (tally.counts.get(key) ?? 0) + 1);
  return outcome;
}

function judge(text: string, maxMeshes: number): Outcome {
  let read: SectionReadResult | undefined;
  let solved: { readonly answer: SectionAnswer; readonly result: SectionResult } | undefined;
  try {
    read = readSection(text, { file: 'random.yaml' });
    solved = solve(read, maxMeshes);
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const placed = read === undefined ? error : read.place(error);
    expectPlaces(placed, text);
    return { refused: placed.faults.map(({ code }) => code) };
  }
  expectSound(read, solved.answer, solved.result);
  return solved.result.accurate && solved.result.converged ? 'accurate' : 'not reached';
}

function solve({ problem, warnings }: SectionReadResult, maxMeshes: number) {
  const { section, setup, probes } = problem;
  const answer = finish(
    probeSteps(section, setup, probes, {
      accuracy: Math.max(problem.accuracy, LIMITS.accuracy),
      maxMeshes: Math.min(problem.maxMeshes ?? Infinity, maxMeshes),
      maxTriangles: Math.min(problem.maxTriangles ?? Infinity, LIMITS.maxTriangles),
    }),
  );
  const result = describeSection(problem, answer, warnings, { version: '0', inputSha256: '' });
  return { answer, result };
}

/** The bytes of the result, or the faults, for comparing one run with another. */
export function bytesOf(text: string): string {
  try {
    return JSON.stringify(solve(readSection(text, { file: 'random.yaml' }), 2).result);
  } catch (error) {
    return String(error);
  }
}

/** Every fault says where in the text it is, what is wrong there, and what would do; in words fit for a terminal. */
export function expectPlaces(error: InputError, text: string, file = 'random.yaml'): void {
  const lines = text.split('\n');
  expect(error.faults.length).toBeGreaterThan(0);
  expect(error.message.length).toBeLessThan(200_000);
  for (const fault of error.faults) {
    const told = formatFault(fault);
    expect(fault.at?.file, told).toBe(file);
    const { line = 0, column = 0 } = fault.at ?? {};
    expect(line, told).toBeGreaterThanOrEqual(1);
    expect(line, told).toBeLessThanOrEqual(lines.length);
    expect(column, told).toBeGreaterThanOrEqual(1);
    expect(column, told).toBeLessThanOrEqual(lines[line - 1].length + 1);
    expect(fault.wrong.trim(), told).not.toBe('');
    expect(fault.remedy.trim(), told).not.toBe('');
    expect(told).not.toMatch(/\p{Cc}|undefined|\[object/u);
  }
}

function expectSound({ problem }: SectionReadResult, answer: SectionAnswer, result: SectionResult): void {
  JSON.parse(JSON.stringify(result));
  if (!result.converged) return;
  const { field, energy, coenergy } = answer;
  const bounded = problem.section.open !== true || (field.netCurrent ?? 0) === 0;
  if (bounded || !Number.isNaN(energy)) {
    expect(energy).toBeGreaterThanOrEqual(-1e-9 * (Math.abs(energy) + Math.abs(coenergy)));
    expect(coenergy).not.toBeNaN();
  }
  if (!result.accurate) return;
  expect(result.rel_err).toBeLessThanOrEqual(Math.max(problem.accuracy, LIMITS.accuracy));
  const cut = regionsOnOutline(field.mesh);
  result.probes.forEach((probe, i) => {
    if (probe.kind === 'line' || probe.kind === 'point') return; // outside there is no field
    const asked = problem.probes[i];
    if (asked.kind === 'force' && asked.on.some((name) => cut.has(name))) return; // across a cut no force is known
    for (const [key, value] of Object.entries(probe)) if (!key.endsWith('_rel_err')) expect(value, key).not.toBeNaN();
  });
}

/** Names of the regions that reach the outline. */
function regionsOnOutline(mesh: Mesh): Set<string> {
  const corners = new Set<number>();
  mesh.edgeToSide.forEach((side, e) => {
    if (side >= 0) corners.add(mesh.edges[2 * e]).add(mesh.edges[2 * e + 1]);
  });
  const names = new Set<string>();
  mesh.triangles.forEach((corner, k) => {
    if (corners.has(corner)) names.add(mesh.regionNames[mesh.triangleToRegion[Math.floor(k / 3)]]);
  });
  return names;
}
