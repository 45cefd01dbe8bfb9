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

/** Does the work so many times and tells the mean milliseconds of one; in this process or in another. */
export type Timer = (times: number) => number | Promise<number>;

/** A timer of work in this process. */
export const timerOf =
  (work: () => unknown): Timer =>
  (times) =>
    timed(() => {
      for (let i = 0; i < times; i++) work();
    }).ms / times;

/** Work much shorter than this is repeated within one sample, so that the clock and the other process's pipe do not show. */
const SAMPLE_MS = 20;

/**
 * Medians of several timers whose samples alternate, so that they see the same moments of a shared machine: only the
 * ratios of what comes back mean much. Each is warmed up until it has run twice and for half a second, ten times at most.
 */
export async function interleave(runs: number, timers: readonly Timer[]): Promise<number[]> {
  const times: number[] = [];
  for (const timer of timers) {
    let last = await timer(1);
    for (let count = 1, spent = last; count < 2 || (spent < 2000 && count < 60); count++, spent += last) {
      last = await timer(1);
    }
    times.push(Math.max(1, Math.round(SAMPLE_MS / last)));
  }
  const samples: number[][] = timers.map(() => []);
  for (let run = 0; run < runs; run++) {
    for (let k = 0; k < timers.length; k++) samples[k].push(await timers[k](times[k]));
  }
  return samples.map(median);
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
