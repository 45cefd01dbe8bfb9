import type { SymmetricPattern } from '@gapwright/fem-core/sparse';
import type { Placement } from '../../../packages/fem-core/src/sparse/nested-dissection.js';
import { patternFrom } from './systems.js';

export interface QuadraticSquare {
  readonly pattern: SymmetricPattern;
  readonly values: Float64Array;
  readonly placement: Required<Placement>;
}

export interface SquareOptions {
  /** Reluctivity at a point; 1 if absent. */
  readonly coefficient?: (x: number, y: number) => number;
  /** What holds at x = 0 and 1: 'fixed' (the rule), or the right side repeats the left one, or its negative. */
  readonly sides?: 'fixed' | 'repeating' | 'reversing';
}

/**
 * The Laplacian of six-node triangles on the unit square, fixed at y = 0 and 1: two triangles in each of cells x cells
 * squares. Nodes are the points of a grid twice as fine; those with two even places are corners.
 */
export function quadraticSquare(cells: number, options: SquareOptions = {}): QuadraticSquare {
  const { coefficient = () => 1, sides = 'fixed' } = options;
  const side = 2 * cells + 1;
  const numberOf = new Int32Array(side * side).fill(-1);
  const sign = new Int8Array(side * side).fill(1);
  let n = 0;
  for (let y = 1; y < side - 1; y++) {
    for (let x = sides === 'fixed' ? 1 : 0; x < side - 1; x++) numberOf[y * side + x] = n++;
    if (sides === 'fixed') continue;
    numberOf[y * side + side - 1] = numberOf[y * side];
    sign[y * side + side - 1] = sides === 'reversing' ? -1 : 1;
  }
  const placement = placementOf(n, side, numberOf, sign);
  const entries = new Map<number, number>();
  const couplings: [number, number][] = [];
  for (const nodes of triangles(cells)) {
    const [x, y] = [0, 1].map((axis) => nodes.slice(0, 3).reduce((sum, p) => sum + p[axis], 0) / (3 * (side - 1)));
    const local = stiffness(nodes, coefficient(x, y));
    const at = nodes.map(([px, py]) => py * side + px);
    for (let a = 0; a < 6; a++) {
      for (let b = 0; b < 6; b++) {
        const [i, j] = [numberOf[at[a]], numberOf[at[b]]];
        if (i < j || j < 0) continue;
        if (!entries.has(i * n + j)) couplings.push([i, j]);
        entries.set(i * n + j, (entries.get(i * n + j) ?? 0) + sign[at[a]] * sign[at[b]] * local[a][b]);
      }
    }
  }
  const pattern = patternFrom(n, couplings);
  const values = new Float64Array(pattern.row.length);
  for (let j = 0; j < n; j++) {
    for (let p = pattern.start[j]; p < pattern.start[j + 1]; p++) values[p] = entries.get(pattern.row[p] * n + j) ?? 0;
  }
  return { pattern, values, placement };
}

type Node = readonly [x: number, y: number];

function placementOf(n: number, side: number, numberOf: Int32Array, sign: Int8Array): Required<Placement> {
  const points = new Float64Array(2 * n);
  const ends = new Int32Array(2 * n).fill(-1);
  const weights = new Float64Array(2 * n);
  for (let y = side - 1; y >= 0; y--) {
    for (let x = side - 1; x >= 0; x--) {
      const i = numberOf[y * side + x];
      if (i < 0) continue;
      points.set([x, y], 2 * i);
      // A middle lies on a side of a square or, both places odd, on its diagonal from bottom left to top right.
      [-1, 1].forEach((way, end) => {
        const at = (y + (y % 2) * way) * side + x + (x % 2) * way;
        ends[2 * i + end] = numberOf[at];
        weights[2 * i + end] = (sign[y * side + x] * sign[at]) / 2;
      });
    }
  }
  return { points, ends, weights };
}

/** Corners counter-clockwise, then the middles opposite them. */
function triangles(cells: number): Node[][] {
  const middle = ([a, b]: Node, [c, d]: Node): Node => [(a + c) / 2, (b + d) / 2];
  const found: Node[][] = [];
  for (let y = 0; y < 2 * cells; y += 2) {
    for (let x = 0; x < 2 * cells; x += 2) {
      const top: Node = [x + 2, y + 2];
      for (const third of [
        [x + 2, y],
        [x, y + 2],
      ] as const) {
        const corners: Node[] = third[1] === y ? [[x, y], third, top] : [[x, y], top, third];
        found.push([...corners, ...[0, 1, 2].map((k) => middle(corners[(k + 1) % 3], corners[(k + 2) % 3]))]);
      }
    }
  }
  return found;
}

/**
 * Stiffness of a six-node triangle from g[i][j] = area grad(l_i) . grad(l_j) of its area coordinates, by the integrals of
 * l_i^2 (area/6) and l_i l_j (area/12) with N_i = l_i (2 l_i - 1), N_jk = 4 l_j l_k.
 */
function stiffness(nodes: readonly Node[], nu: number): number[][] {
  const [p, q, r] = nodes;
  const edge = [
    [r[0] - q[0], r[1] - q[1]],
    [p[0] - r[0], p[1] - r[1]],
    [q[0] - p[0], q[1] - p[1]],
  ];
  const area2 = edge[0][0] * edge[1][1] - edge[0][1] * edge[1][0];
  const g = edge.map((a) => edge.map((b) => (nu * (a[0] * b[0] + a[1] * b[1])) / (2 * area2)));
  const k = Array.from({ length: 6 }, () => new Array<number>(6).fill(0));
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) {
      const third = 3 - i - j;
      k[i][j] = i === j ? g[i][i] : -g[i][j] / 3;
      // N_i with the middle opposite j, which lies between i and the third corner; with the one opposite i, nothing.
      if (i !== j) k[i][3 + j] = k[3 + j][i] = (4 / 3) * g[i][third];
      if (i === j) {
        const [a, b] = [(i + 1) % 3, (i + 2) % 3];
        k[3 + i][3 + i] = (8 / 3) * (g[a][a] + g[b][b] + g[a][b]);
      } else {
        // Opposite i: between j and third; opposite j: between i and third.
        k[3 + i][3 + j] = (4 / 3) * (2 * g[j][i] + g[j][third] + g[i][third] + g[third][third]);
      }
    }
  }
  return k;
}
