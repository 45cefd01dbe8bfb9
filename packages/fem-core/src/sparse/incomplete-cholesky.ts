import type { SymmetricPattern } from './pattern.js';
import { solveLower, solveUpper } from './pattern.js';
import type { Preconditioner } from './preconditioner.js';

/** First shift tried after a breakdown, as a share of the diagonal, and its growth from one trial to the next. */
const FIRST_SHIFT = 1e-3;
const SHIFT_GROWTH = 4;

/**
 * Incomplete Cholesky factor without fill: L has the pattern of the lower triangle, and L L^T agrees with A on it. Where a
 * pivot is not positive, A + shift diag(A) is factored instead, with the shift grown until all are (Manteuffel, An
 * incomplete factorization technique for positive definite linear systems, 1980). Column by column as in Jones, Plassmann,
 * An improved incomplete Cholesky factorization, 1995.
 *
 * @param values  Float64Array(z): the lower triangle in the order of the pattern
 * @returns the values of L, and the shift; undefined where a diagonal entry is not positive
 */
export function incompleteCholesky(
  pattern: SymmetricPattern,
  values: Float64Array,
): { readonly lower: Float64Array; readonly shift: number } | undefined {
  const { n, start } = pattern;
  for (let j = 0; j < n; j++)
    if (!(values[start[j]] > 0 && values[start[j]] < Number.POSITIVE_INFINITY)) return undefined;
  const lower = new Float64Array(values.length);
  // A matrix times D^-1/2 on both sides with a shift of n would be diagonally dominant: the loop ends.
  for (let shift = 0; shift <= 4 * n + 4; shift = shift === 0 ? FIRST_SHIFT : SHIFT_GROWTH * shift) {
    lower.set(values);
    for (let j = 0; j < n; j++) lower[start[j]] *= 1 + shift;
    if (factorInPlace(pattern, lower)) return { lower, shift };
  }
  return undefined; // some value is not a number
}

/** False where a pivot is not positive. */
function factorInPlace({ n, start, row }: SymmetricPattern, lower: Float64Array): boolean {
  // Each finished column waits in the list of the row of its next unused entry.
  const head = new Int32Array(n).fill(-1);
  const next = new Int32Array(n);
  const used = new Int32Array(n);
  const place = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    const first = start[k];
    const end = start[k + 1];
    for (let p = first; p < end; p++) place[row[p]] = p;
    for (let j = head[k]; j >= 0; ) {
      const following = next[j];
      const from = used[j];
      const to = start[j + 1];
      const factor = lower[from];
      for (let p = from; p < to; p++) {
        const at = place[row[p]];
        if (at >= first) lower[at] -= factor * lower[p]; // places of other columns are lower: no entry here
      }
      enqueue(j, from + 1);
      j = following;
    }
    const pivot = lower[first];
    if (!(pivot > 0)) return false;
    const scale = 1 / Math.sqrt(pivot);
    for (let p = first; p < end; p++) lower[p] *= scale;
    enqueue(k, first + 1);
  }
  return true;

  function enqueue(j: number, at: number): void {
    if (at >= start[j + 1]) return;
    used[j] = at;
    next[j] = head[row[at]];
    head[row[at]] = j;
  }
}

/** z = (L L^T)^-1 r. */
export function incompletePreconditioner(pattern: SymmetricPattern, lower: Float64Array): Preconditioner {
  return (r, z) => {
    z.set(r);
    solveLower(pattern, lower, z);
    solveUpper(pattern, lower, z);
  };
}
