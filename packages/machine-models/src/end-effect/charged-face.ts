/**
 * Potentials of evenly charged plane faces in free space, in closed form.
 *
 * A body magnetised evenly has no charge inside and sigma = M . n on its faces; its field outside is B = -grad V with
 * V = (1/4 pi) sum over faces mu0 sigma integral dS/R. (The arctangent and logarithm forms of the field of a block,
 * from memory G. Akoun and J.-P. Yonnet, "3D analytical calculation of the forces exerted between two cuboidal
 * magnets", 1984, and E. P. Furlani, Permanent Magnet and Electromechanical Devices, 2001, are derivatives of the same
 * integral over rectangles.)
 */

/** Numbers an edge takes in the arrays below: d, l1, l2, q1. */
export const EDGE = 4;

/**
 * Places a polygon's edges as seen from a point's foot in its plane.
 *
 * @param uv    Float64Array(2n): corners in order, counter-clockwise as seen along the normal, m
 * @param u     foot of the point
 * @param v     foot of the point
 * @param edges Float64Array(4n), overwritten: of edge i, from corner i to the next, its distance d from the foot
 *              (positive where the foot lies inside it), its ends l1 and l2 along its direction from the foot, and the
 *              square q1 of the distance of its first corner
 */
export function placeEdges(uv: Float64Array, u: number, v: number, edges: Float64Array): void {
  const count = uv.length / 2;
  let du = uv[0] - u;
  let dv = uv[1] - v;
  for (let i = 0; i < count; i++) {
    const next = i + 1 < count ? i + 1 : 0;
    const du2 = uv[2 * next] - u;
    const dv2 = uv[2 * next + 1] - v;
    const length = Math.sqrt((du2 - du) ** 2 + (dv2 - dv) ** 2);
    const eu = (du2 - du) / length;
    const ev = (dv2 - dv) / length;
    edges[EDGE * i] = du * ev - dv * eu;
    edges[EDGE * i + 1] = du * eu + dv * ev;
    edges[EDGE * i + 2] = du2 * eu + dv2 * ev;
    edges[EDGE * i + 3] = du * du + dv * dv;
    du = du2;
    dv = dv2;
  }
}

/** The same for the rectangle u1..u2, v1..v2 (relative to the foot). */
export function placeRectangle(u1: number, u2: number, v1: number, v2: number, edges: Float64Array): void {
  const put = (at: number, d: number, l1: number, l2: number): void => {
    edges[at] = d;
    edges[at + 1] = l1;
    edges[at + 2] = l2;
    edges[at + 3] = d * d + l1 * l1;
  };
  put(0, -v1, u1, u2);
  put(EDGE, u2, v1, v2);
  put(2 * EDGE, v2, -u2, -u1);
  put(3 * EDGE, -u1, -v2, -v1);
}

/**
 * Integral of dS/R over a polygon:
 *
 *   sum over edges d ln[(R2 + l2)/(R1 + l1)]  -  |h| Omega
 *
 * with R1, R2 from the point to the edge's ends and Omega the solid angle the polygon fills,
 *
 *   Omega = sum over edges atan[d l2/(d^2 + h^2 + |h| R2)] - atan[d l1/(d^2 + h^2 + |h| R1)],
 *
 * taken as the argument of one product of complex numbers: it lies in 0..2 pi.
 * From memory: D. R. Wilton and others, "Potential integrals for uniform and linear source distributions on polygonal
 * and polyhedral domains", IEEE Trans. Antennas Propag., 1984.
 *
 * @param edges as `placeEdges` gives them
 * @param count of edges
 * @param rise  h: the point's distance from the polygon's plane, of either sign, m; not on the polygon's rim
 * @returns     m
 */
export function facePotential(edges: Float64Array, count: number, rise: number): number {
  const h = Math.abs(rise);
  const h2 = h * h;
  const first = Math.sqrt(edges[3] + h2);
  let r1 = first;
  let sum = 0;
  let re = 1;
  let im = 0;
  for (let i = 0; i < count; i++) {
    const at = EDGE * i;
    const d = edges[at];
    const l1 = edges[at + 1];
    const l2 = edges[at + 2];
    const r2 = i + 1 < count ? Math.sqrt(edges[at + EDGE + 3] + h2) : first;
    // Of the two forms of the logarithm the one that adds.
    if (d !== 0) sum += d * Math.log(l1 + l2 > 0 ? (r2 + l2) / (r1 + l1) : (r1 - l1) / (r2 - l2));
    const e = d * d + h2;
    const a2 = e === 0 ? 0 : (d * l2) / (e + h * r2);
    const a1 = e === 0 ? 0 : (d * l1) / (e + h * r1);
    const c = 1 + a1 * a2;
    const s = a2 - a1;
    const turned = re * c - im * s;
    im = re * s + im * c;
    re = turned;
    r1 = r2;
  }
  const angle = Math.atan2(im, re);
  return sum - h * (angle < -SMALL_ANGLE ? angle + 2 * Math.PI : angle);
}

/** Rounding may turn a solid angle of nothing a hair negative. */
const SMALL_ANGLE = 1e-6;

/** Area, centroid, second moments about it and greatest distance from it of a polygon: m^2, m, m^4, m. */
export interface Moments {
  readonly area: number;
  readonly u: number;
  readonly v: number;
  readonly uu: number;
  readonly uv: number;
  readonly vv: number;
  readonly reach: number;
}

/** @param corners as for `placeEdges` */
export function polygonMoments(corners: Float64Array): Moments {
  const count = corners.length / 2;
  let [area, su, sv, uu, uv, vv] = [0, 0, 0, 0, 0, 0];
  const [u0, v0] = [corners[0], corners[1]]; // moments about a corner first
  for (let i = 0; i < count; i++) {
    const next = (i + 1) % count;
    const [a, b] = [corners[2 * i] - u0, corners[2 * i + 1] - v0];
    const [c, d] = [corners[2 * next] - u0, corners[2 * next + 1] - v0];
    const cross = a * d - c * b;
    area += cross / 2;
    su += (cross * (a + c)) / 6;
    sv += (cross * (b + d)) / 6;
    uu += (cross * (a * a + a * c + c * c)) / 12;
    vv += (cross * (b * b + b * d + d * d)) / 12;
    uv += (cross * (2 * a * b + a * d + c * b + 2 * c * d)) / 24;
  }
  const [u, v] = [su / area, sv / area];
  let reach = 0;
  for (let i = 0; i < count; i++) {
    reach = Math.max(reach, Math.hypot(corners[2 * i] - u0 - u, corners[2 * i + 1] - v0 - v));
  }
  const about = { uu: uu - area * u * u, uv: uv - area * u * v, vv: vv - area * v * v };
  return { area, u: u + u0, v: v + v0, ...about, reach };
}
