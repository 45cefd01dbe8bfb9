import type { FigureResult, Honesty, MeasuredOrder, Verification } from '@gapwright/fem-core/verify';
import { percent } from '../figures.js';
import { isNought, ROUNDING } from '../nought.js';
import { resultJson } from '../results-json.js';
import { exitStatus, type Surroundings, stopIfInterrupted } from '../surroundings.js';
import { ownVersion } from '../version.js';

export interface VerifyOptions {
  readonly json?: boolean;
  readonly quiet?: boolean;
}

/** `gapwright verify`: the solver against closed forms, figure by figure. The one command that prints times among its results. */
export async function runVerify(
  verifier: Verification,
  options: VerifyOptions,
  { stdout, stderr, signal }: Surroundings,
): Promise<number> {
  const begun = performance.now();
  const figures: FigureResult[] = [];
  for (let k = 0; k < verifier.caseCount; k++) {
    await new Promise((go) => setImmediate(go)); // lets an interruption in
    stopIfInterrupted(signal);
    figures.push(...verifier.runCase(k, () => performance.now()));
    const name = figures.at(-1)?.name ?? '';
    if (options.quiet !== true && stderr.isTTY === true)
      stderr.write(`case ${k + 1} of ${verifier.caseCount}: ${name}\n`);
  }
  const orders = verifier.measureOrders();
  const honesty = verifier.measureHonesty(figures);
  const text = options.json === true ? verifyJson(figures, orders, honesty) : verifyText(figures, orders, honesty);
  stdout.write(text);
  if (options.quiet !== true) stderr.write(`all done in ${((performance.now() - begun) / 1000).toFixed(1)} s\n`);
  return [...figures, ...orders].every(({ holds }) => holds) ? exitStatus.done : exitStatus.notReached;
}

function verifyJson(figures: readonly FigureResult[], orders: readonly MeasuredOrder[], honesty: Honesty): string {
  return resultJson({
    format: 'gapwright-verify/1',
    gapwright: ownVersion(),
    cases: figures.map((figure) => ({
      name: figure.name,
      quantity: figure.quantity,
      formula: figure.formula,
      source: figure.source,
      expected: figure.expected,
      got: figure.got,
      rel_err: figure.relativeError,
      estimated_rel_err: figure.estimatedError,
      bound: figure.bound,
      nodes: figure.nodes,
      ms: figure.ms,
      holds: figure.holds,
    })),
    orders: orders.map(({ elements, potential, field, expected, holds }) => ({
      elements,
      A_order: potential,
      A_order_expected: expected.potential,
      B_order: field,
      B_order_expected: expected.field,
      holds,
    })),
    honesty: { figures: honesty.figures, covered: honesty.covered, median: honesty.median },
  });
}

const HEAD = ['', 'expected', 'got', 'error', 'estimate', 'bound', ''] as const;

/** A case is a line of its own, its figures stand below it. */
function verifyText(figures: readonly FigureResult[], orders: readonly MeasuredOrder[], honesty: Honesty): string {
  const rows = figures.map((figure) => [
    `  ${figure.quantity}`,
    ...shownValues(figure),
    ...[figure.relativeError, figure.estimatedError, figure.bound].map((share) => share.toExponential(1)),
    figure.holds ? 'holds' : 'OUT',
  ]);
  const [head, ...lines] = alignColumns([HEAD, ...rows]);
  const cases = lines.flatMap((line, i) => {
    const { name, nodes, ms } = figures[i];
    return figures[i - 1]?.name === name ? [line] : ['', `${name} (${nodes} nodes, ${ms.toFixed(0)} ms)`, line];
  });
  const orderLine = ({ elements, potential, field, expected, holds }: MeasuredOrder): string =>
    `${elements.padEnd(18)}A ${potential.toFixed(2)} (${expected.potential})   B ${field.toFixed(2)} (${expected.field})   ${holds ? 'holds' : 'OUT'}`;
  return [
    'error, estimate, bound: true and estimated error and what is allowed, as shares of the value,',
    'or of the field at hand where that is 0; estimates bind in practice, not always',
    '',
    head,
    ...cases,
    '',
    'orders of convergence by elements, of A and of B in L2 (the energy norm), with what theory promises:',
    ...orders.map(orderLine),
    '',
    `honesty: the true error is within the estimate in ${percent(honesty.covered)} of ${honesty.figures} figures, ` +
      `in the median ${honesty.median.toPrecision(2)} of it`,
    ...figures.filter(({ holds }) => !holds).map(({ name, quantity }) => `OUT: ${name}, ${quantity}`),
    countLine(figures, orders),
    '',
  ].join('\n');
}

function alignColumns(rows: readonly (readonly string[])[]): string[] {
  const widths = HEAD.map((_, c) => Math.max(...rows.map((row) => row[c].length)));
  return rows.map((row) =>
    row
      .map((cell, c) => (c === 0 || c === row.length - 1 ? cell.padEnd(widths[c]) : cell.padStart(widths[c])))
      .join('  ')
      .trimEnd(),
  );
}

/** What is expected and what was got: 0 where they are rounding, or where the estimate of the error leaves nothing of it. */
function shownValues({ expected, got, relativeError, estimatedError }: FigureResult): readonly string[] {
  const scale = Math.abs(got - expected) / relativeError; // of which errors are shares; no number where both are the same
  const floor = ROUNDING * scale;
  const lost = isNought(got, (estimatedError * scale) / Math.abs(got), floor);
  return [Math.abs(expected) < floor ? 0 : expected, lost ? 0 : got].map(shortNumber);
}

/** Seven digits; small and large numbers with an exponent. */
function shortNumber(value: number): string {
  const size = Math.abs(value);
  return size === 0 || (size >= 1e-3 && size < 1e6) ? String(Number(value.toPrecision(7))) : value.toExponential(6);
}

function countLine(figures: readonly FigureResult[], orders: readonly MeasuredOrder[]): string {
  const cases = new Set(figures.map(({ name }) => name)).size;
  const out = [...figures, ...orders].filter(({ holds }) => !holds).length;
  return `${cases} cases, ${figures.length} figures, ${orders.length} orders: ${out === 0 ? 'all hold' : `${out} OUT`}`;
}
