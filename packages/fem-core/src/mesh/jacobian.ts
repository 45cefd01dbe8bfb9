/** Coordinates along one axis of a six-node triangle's nodes: corners, then the middles opposite them. */
export type SixNodes = readonly number[];

/** Points along an edge at which a determinant is looked at that its bound from below does not settle. */
const STEPS = 12;

/**
 * A six-node triangle's map is nowhere turned over: its determinant is positive. At a cusp, where drawn lines touch, it is
 * zero at the corner itself; what rounding of the coordinates makes of that passes.
 *
 * The determinant is of second order in the area coordinates; written in Bernstein's polynomials it is nowhere less than its
 * least coefficient, and where that is not positive it is looked at on a lattice (Johnen, Remacle, Geuzaine, Geometrical
 * validity of curvilinear finite elements, J. Comput. Phys. 233, 2013).
 */
export function isUnfolded(x: SixNodes, y: SixNodes): boolean {
  const det = determinantOf(x, y);
  const corners = [det(0, 0), det(1, 0), det(0, 1)];
  const halves = [det(0.5, 0.5), det(0, 0.5), det(0.5, 0)]; // opposite the corners
  const between = halves.map((half, k) => 2 * half - 0.5 * (corners[(k + 1) % 3] + corners[(k + 2) % 3]));
  if (Math.min(...corners, ...between) > 0) return true;
  const rounding = roundingOf(x, y);
  for (let i = 0; i <= STEPS; i++) {
    for (let j = 0; i + j <= STEPS; j++) if (!(det(i / STEPS, j / STEPS) > -rounding)) return false;
  }
  return true;
}

/** What the rounding of coordinates makes of a determinant, m^2. */
function roundingOf(x: SixNodes, y: SixNodes): number {
  const spread = (values: SixNodes): number => Math.max(...values) - Math.min(...values);
  const reach = Math.max(...x.map(Math.abs), ...y.map(Math.abs));
  return 16 * Number.EPSILON * reach * (spread(x) + spread(y));
}

/**
 * The determinant at area coordinates 1 - p - q, p, q of the map x = sum l_k x_k + 4 sum l_i l_j d_k, where d_k is how far
 * the middle between corners i and j is off half-way.
 */
function determinantOf(x: SixNodes, y: SixNodes): (p: number, q: number) => number {
  const off = (v: SixNodes) => [0, 1, 2].map((k) => v[3 + k] - 0.5 * (v[(k + 1) % 3] + v[(k + 2) % 3]));
  const axes = [x, y].map((v) => ({ v, d: off(v) }));
  return (p, q) => {
    const o = 1 - p - q;
    const [[xp, xq], [yp, yq]] = axes.map(({ v, d }) => [
      v[1] - v[0] + 4 * (d[0] * q - d[1] * q + d[2] * (o - p)),
      v[2] - v[0] + 4 * (d[0] * p + d[1] * (o - q) - d[2] * p),
    ]);
    return xp * yq - xq * yp;
  };
}
