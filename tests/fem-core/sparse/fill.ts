import type { SymmetricPattern } from '@gapwright/fem-core/sparse';

/** Entries of the Cholesky factor below and on the diagonal, and the sum of squares of its column counts. */
export interface Fill {
  readonly entries: number;
  readonly work: number;
}

/** By walking each row's subtree of the elimination tree (Liu, The role of elimination trees, 1990). */
export function fillUnder({ n, start, row }: SymmetricPattern, order: Int32Array): Fill {
  const place = new Int32Array(n);
  order.forEach((i, k) => {
    place[i] = k;
  });
  const earlier: number[][] = Array.from({ length: n }, () => []);
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const [a, b] = [place[j], place[row[p]]];
      earlier[Math.max(a, b)].push(Math.min(a, b));
    }
  }
  const parent = new Int32Array(n).fill(-1);
  const seen = new Int32Array(n).fill(-1);
  const count = new Int32Array(n).fill(1);
  for (let k = 0; k < n; k++) {
    seen[k] = k;
    for (const first of earlier[k]) {
      for (let i = first; seen[i] !== k; i = parent[i]) {
        if (parent[i] < 0) parent[i] = k;
        seen[i] = k;
        count[i]++;
      }
    }
  }
  return { entries: count.reduce((a, b) => a + b, 0), work: count.reduce((a, b) => a + b * b, 0) };
}
