/** Milliseconds of one call, and what it returned. */
export function timed<T>(work: () => T): { readonly ms: number; readonly result: T } {
  const begun = performance.now();
  const result = work();
  return { ms: performance.now() - begun, result };
}

/** Median of `runs` calls after as many warm-up calls as asked, ms. */
export function medianMs(runs: number, work: () => unknown, warmUp = 2): number {
  for (let i = 0; i < warmUp; i++) work();
  return median(Array.from({ length: runs }, () => timed(work).ms));
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[sorted.length >> 1];
}

/** A table on standard output: the first row heads the columns, the first column stands left, the others right. */
export function printTable(rows: readonly (readonly string[])[]): void {
  const widths = rows[0].map((_, c) => Math.max(...rows.map((row) => (row[c] ?? '').length)));
  for (const row of rows) {
    console.log(
      `  ${row.map((cell, c) => (c === 0 ? cell.padEnd(widths[c]) : cell.padStart(widths[c]))).join('   ')}`.trimEnd(),
    );
  }
}

export const ms = (value: number): string => (value < 10 ? value.toFixed(2) : value.toFixed(value < 100 ? 1 : 0));
