import type { FigureResult, Verification } from '@gapwright/fem-core/verify';
import { describe, expect, test } from 'vitest';
import { runVerify } from '../../packages/cli/src/commands/verify.js';
import { bodyCases, circuitCases } from '../../packages/fem-core/src/verify/cases.js';
import { measureHonesty } from '../../packages/fem-core/src/verify/honesty.js';
import { runCase } from '../../packages/fem-core/src/verify/verification-case.js';

const figure = (name: string, quantity: string, error: number, bound: number): FigureResult => ({
  name,
  quantity,
  formula: 'B = 1',
  source: 'computed here',
  expected: 1,
  got: 1 + error,
  relativeError: error,
  estimatedError: 2 * error,
  bound,
  slack: 0,
  nodes: 7,
  ms: 3.4,
  holds: error <= bound,
});

const made = (cases: readonly (readonly FigureResult[])[], orderHolds = true): Verification => ({
  caseCount: cases.length,
  runCase: (k) => cases[k],
  measureOrders: () => [
    { elements: 'linear', potential: 2, field: 1, expected: { potential: 2, field: 1 }, runs: [], holds: orderHolds },
  ],
  measureHonesty: () => ({ figures: 3, covered: 1, median: 0.5 }),
});

async function say(
  verifier: Verification,
  options: { readonly json?: boolean; readonly quiet?: boolean } = {},
  signal: AbortSignal = new AbortController().signal,
): Promise<{ status: number; out: string; err: string }> {
  const said = { out: '', err: '' };
  const stream = (name: 'out' | 'err') => ({
    write: (text: string) => {
      said[name] += text;
    },
  });
  const status = await runVerify(verifier, options, {
    stdout: stream('out'),
    stderr: stream('err'),
    env: {},
    signal,
  });
  return { status, ...said };
}

const sound = [
  [figure('wire', 'B, T', 1e-4, 1e-3), figure('wire', 'L, H/m', 2e-4, 1e-3)],
  [figure('ring', 'A', 0, 1e-3)],
];
const unsound = [...sound, [figure('slot', 'k', 2e-3, 1e-3)]];

describe('gapwright verify', () => {
  test('ends with 0 where every figure holds, with 3 where one figure or one order is out', async () => {
    expect((await say(made(sound))).status).toBe(0);
    expect((await say(made(unsound))).status).toBe(3);
    expect((await say(made(sound, false))).status).toBe(3);
  });

  test('prints a line a figure, the orders, the honesty, and counts at the end', async () => {
    const { out } = await say(made(unsound));
    const lines = out.trimEnd().split('\n');
    const wire = lines.indexOf('wire (7 nodes, 3 ms)'); // the case is named once
    expect(lines[wire + 1]).toMatch(/^ {2}B, T +1 +1\.0001 +1\.0e-4 +2\.0e-4 +1\.0e-3 +holds$/);
    expect(lines[wire + 2]).toMatch(/^ {2}L, H\/m .*holds$/);
    expect(lines).toContain('OUT: slot, k'); // told again where it is not overlooked
    expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(100);
    expect(out).toMatch(/^linear +A 2\.00 \(2\) +B 1\.00 \(1\) +holds$/m);
    expect(out).toContain('100 % of 3 figures');
    expect(lines.at(-1)).toBe('3 cases, 4 figures, 1 orders: 1 OUT');
    expect((await say(made(sound))).out).toMatch(/2 cases, 3 figures, 1 orders: all hold\n$/);
  });

  test('prints 0 where rounding or the error leaves nothing of a figure, its error beside it; JSON keeps the number', async () => {
    const nought = (got: number, relativeError: number, estimatedError: number) => [
      { ...figure('null', 'force, N/m', 0, 1e-3), expected: 0, got, relativeError, estimatedError },
    ];
    const shown = async (got: number, relativeError: number, estimatedError: number) =>
      /force, N\/m +(.*?) +holds/.exec((await say(made([nought(got, relativeError, estimatedError)]))).out)?.[1];
    expect(await shown(-3e-17, 3e-15, 3e-16)).toMatch(/^0 +0 +3\.0e-15 +3\.0e-16/); // of the scale 0.01
    expect(await shown(2e-7, 2e-5, 2e-4)).toMatch(/^0 +0 +2\.0e-5 +2\.0e-4/);
    expect(await shown(2e-7, 2e-5, 3e-5)).toMatch(/^0 +2\.000000e-7 +2\.0e-5 +3\.0e-5/);
    expect(await shown(3e-17, 3e-5, 3e-6)).toMatch(/^0 +3\.000000e-17 +3\.0e-5/); // of the scale 1e-12
    const { out } = await say(made([nought(-3e-17, 3e-15, 3e-16)]), { json: true });
    expect(JSON.parse(out).cases[0].got).toBe(-3e-17);
  });

  test('as JSON gives the keys that are promised, for each figure', async () => {
    const { out, err } = await say(made(unsound), { json: true, quiet: true });
    const result = JSON.parse(out);
    expect(result.format).toBe('gapwright-verify/1');
    expect(result.cases.map((one: { name: string }) => one.name)).toEqual(['wire', 'wire', 'ring', 'slot']);
    expect(result.cases[3]).toEqual({
      name: 'slot',
      quantity: 'k',
      formula: 'B = 1',
      source: 'computed here',
      expected: 1,
      got: 1.002,
      rel_err: 2e-3,
      estimated_rel_err: 4e-3,
      bound: 1e-3,
      nodes: 7,
      ms: 3.4,
      holds: false,
    });
    expect(err).toBe('');
  });

  test('stops between cases when it is interrupted, and prints no table', async () => {
    const controller = new AbortController();
    const verifier = made(sound);
    const stopping = {
      ...verifier,
      runCase: (k: number) => {
        controller.abort();
        return sound[k];
      },
    };
    await expect(say(stopping, {}, controller.signal)).rejects.toThrow('interrupted');
  });

  test('real cases pass through it with their times', async () => {
    const cases = [bodyCases()[0], circuitCases()[0]];
    let clock = 0;
    const verifier: Verification = {
      caseCount: cases.length,
      runCase: (k) => runCase(cases[k], { now: () => clock++ }),
      measureOrders: () => [],
      measureHonesty,
    };
    const { status, out } = await say(verifier, { json: true });
    expect(status).toBe(0);
    const figures: { name: string; ms: number; nodes: number }[] = JSON.parse(out).cases;
    expect(new Set(figures.map(({ name }) => name))).toEqual(new Set(cases.map(({ name }) => name)));
    for (const { ms, nodes } of figures) {
      expect(ms).toBe(1);
      expect(nodes).toBeGreaterThan(6);
    }
  });
});
