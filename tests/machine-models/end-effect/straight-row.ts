/**
 * The fundamental of a straight row of magnets on two discs by finite differences, without images and without closed
 * forms, so that discs may end and magnets may have recoil. V(y, z) cos(k x); z along the magnets' length from their
 * middle, y from the mid-plane, where V = 0:
 *
 *   d/dz (mu dV/dz) + d/dy (mu dV/dy) - k^2 mu V = dBr/dy,   V = 0 on steel and far away
 */
export interface StraightRow {
  /** 1/m. */
  readonly k: number;
  readonly gap: number;
  readonly thickness: number;
  readonly length: number;
  readonly recoil: number;
  /** How far the discs go on beyond the magnets' ends, and how thick they are, m. */
  readonly overhang: number;
  readonly disc: number;
  readonly winding: number;
  /** Cells; all lengths are multiples of them, m. */
  readonly cell: number;
}

/** By averaged over the winding, for magnets of 1 T: at z = 0, cell, 2 cell, ... */
export function rowField({
  k,
  gap,
  thickness,
  length,
  recoil,
  overhang,
  disc,
  winding,
  cell,
}: StraightRow): Float64Array {
  const across = (size: number): number => Math.round(size / cell);
  const [face, back, rear] = [gap / 2, gap / 2 + thickness, gap / 2 + thickness + disc].map(across);
  const [end, rim] = [across(length / 2), across(length / 2 + overhang)];
  const [columns, rows] = [Math.max(rim, end) + across(0.05), rear + across(0.04)];
  const muOf = (i: number, j: number): number => (i >= 0 && i < end && j >= face && j < back ? recoil : 1);
  // Unknowns column by column, rows 1 ... rows - 1; the last column is V = 0.
  const height = rows - 1;
  const count = columns * height;
  const steel = (i: number, j: number): boolean => i <= rim && j >= back && j <= rear;
  // Lower band: matrix[n * (height + 1) + b] holds entry (n, n - b).
  const stride = height + 1;
  const matrix = new Float64Array(count * stride);
  const right = new Float64Array(count);
  for (let i = 0; i < columns; i++) {
    for (let j = 1; j < rows; j++) {
      const n = i * height + j - 1;
      if (steel(i, j)) {
        matrix[n * stride] = 1;
        continue;
      }
      // Mirrored at z = 0: only cells of z > 0 count.
      const [a, b, c, d] = [muOf(i, j - 1), muOf(i, j), i > 0 ? muOf(i - 1, j - 1) : 0, i > 0 ? muOf(i - 1, j) : 0];
      const [east, west, north, south] = [(a + b) / 2, (c + d) / 2, (b + d) / 2, (a + c) / 2];
      const mass = ((a + b + c + d) / 4) * (k * cell) ** 2;
      matrix[n * stride] = east + west + north + south + mass;
      if (j > 1 && !steel(i, j - 1)) matrix[n * stride + 1] = -south;
      if (i > 0 && !steel(i - 1, j)) matrix[n * stride + height] = -west;
      const share = i === 0 || i === end ? 0.5 : i < end ? 1 : 0;
      if (j === face) right[n] = -share * cell;
      if (j === back) right[n] = share * cell;
    }
  }
  solveBand(matrix, right, count, stride);
  const top = across(winding / 2);
  return Float64Array.from({ length: columns }, (_, i) => -right[i * height + top - 1] / (winding / 2));
}

/** Symmetric positive definite, lower band in rows; the right side becomes the solution. Cholesky, L D L^T. */
function solveBand(matrix: Float64Array, right: Float64Array, count: number, stride: number): void {
  const width = stride - 1;
  for (let n = 0; n < count; n++) {
    const row = n * stride;
    const first = Math.max(0, n - width);
    for (let m = first; m < n; m++) {
      // u(n, m) = a(n, m) - sum over l < m of u(n, l) L(m, l); kept as u until the row is done.
      let sum = matrix[row + n - m];
      const other = m * stride;
      for (let l = Math.max(first, m - width); l < m; l++) sum -= matrix[row + n - l] * matrix[other + m - l];
      matrix[row + n - m] = sum;
    }
    for (let m = first; m < n; m++) {
      const u = matrix[row + n - m];
      const scaled = u / matrix[m * stride];
      matrix[row] -= u * scaled;
      matrix[row + n - m] = scaled;
      right[n] -= scaled * right[m];
    }
  }
  for (let n = 0; n < count; n++) right[n] /= matrix[n * stride];
  for (let n = count - 1; n >= 0; n--) {
    for (let m = Math.max(0, n - width); m < n; m++) right[m] -= matrix[n * stride + n - m] * right[n];
  }
}
