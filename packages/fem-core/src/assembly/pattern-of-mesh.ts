import type { SymmetricPattern } from '../sparse/pattern.js';

/** The pattern of a mesh's equations, and where the pairs of each triangle's local functions land in it. */
export interface MeshPattern {
  readonly pattern: SymmetricPattern;
  /** Int32Array(pairs m): for i >= j, at pairs t + i (i + 1)/2 + j, the entry of the pattern; -1 where one of them is fixed. */
  readonly scatter: Int32Array;
}

/**
 * Pattern of all couplings within triangles, those that happen to be zero too, in time linear in the number of triangles:
 * unknowns in rising order, each looking round its triangles for lower ones, give the rows; turned into columns, in which
 * the rows then rise without a sort.
 *
 * @param unknowns  Int32Array(size m): the unknown of each local function of each triangle, -1 where it is fixed
 * @param size  local functions a triangle
 * @param n  number of unknowns
 */
export function patternOfMesh(unknowns: Int32Array, size: number, n: number): MeshPattern {
  const { begin, places } = placesOf(unknowns, n);
  const scatter = new Int32Array((unknowns.length / size) * pairsOf(size)).fill(-1);
  // Entries by rows: those of row j are rowStart[j] ... rowStart[j + 1] - 1, its diagonal first.
  const rowStart = new Int32Array(n + 1);
  const column = new Int32Array(scatter.length + n);
  const start = new Int32Array(n + 1);
  // entry[i]: where the couple of the unknown j at hand with i <= j stands, if seen[i] says j.
  const entry = new Int32Array(n);
  const seen = new Int32Array(n).fill(-1);
  let count = 0;
  for (let j = 0; j < n; j++) {
    seen[j] = j;
    entry[j] = count;
    column[count++] = j;
    for (let p = begin[j]; p < begin[j + 1]; p++) {
      const place = places[p];
      const t = (place / size) | 0;
      const a = place - size * t;
      const base = t * pairsOf(size);
      for (let b = 0; b < size; b++) {
        const i = unknowns[size * t + b];
        if (i < 0 || i > j) continue;
        if (seen[i] !== j) {
          seen[i] = j;
          entry[i] = count;
          column[count++] = i;
        }
        scatter[base + (a > b ? pairsOf(a) + b : pairsOf(b) + a)] = entry[i];
      }
    }
    rowStart[j + 1] = count;
  }
  for (let p = 0; p < count; p++) start[column[p] + 1]++;
  for (let j = 0; j < n; j++) start[j + 1] += start[j];
  const row = new Int32Array(count);
  const next = start.slice(0, n);
  for (let j = 0; j < n; j++) {
    for (let p = rowStart[j]; p < rowStart[j + 1]; p++) {
      const at = next[column[p]]++;
      row[at] = j;
      column[p] = at; // from now on: where the entry has gone
    }
  }
  for (let k = 0; k < scatter.length; k++) if (scatter[k] >= 0) scatter[k] = column[scatter[k]];
  return { pattern: { n, start, row }, scatter };
}

/** Pairs i >= j of so many local functions. */
export const pairsOf = (size: number): number => (size * (size + 1)) / 2;

/** Places of each unknown in the list, by a counting sort: those of unknown j are places[begin[j]] ... places[begin[j + 1] - 1]. */
function placesOf(unknowns: Int32Array, n: number): { begin: Int32Array; places: Int32Array } {
  const begin = new Int32Array(n + 1);
  for (let p = 0; p < unknowns.length; p++) if (unknowns[p] >= 0) begin[unknowns[p] + 1]++;
  for (let j = 0; j < n; j++) begin[j + 1] += begin[j];
  const places = new Int32Array(begin[n]);
  const next = begin.slice(0, n);
  for (let p = 0; p < unknowns.length; p++) if (unknowns[p] >= 0) places[next[unknowns[p]]++] = p;
  return { begin, places };
}
