/** The memory of `SteelTriangles` as numbers of 64 bits and words of 32. */
export interface Views {
  readonly numbers: Float64Array;
  readonly words: Int32Array;
}

const POINTS = 7;
// Places in the scratch, in numbers.
const MOMENTS = 42;
const MATRIX = 78;

/** Below it, in tesla, H/B is the slope of the curve at rest. */
const AT_REST = 1e-9;

/** 2^52: numbers of this size have no fraction, so that adding it rounds. */
const ROUNDER = 2 ** 52;

/** `addPairs` of wasm/assembly.ts, whose comment says what is where. Addresses and steps are in bytes. */
export type AddPairs = (
  pairs: number,
  law: number,
  nodes: number,
  metric: number,
  pointStep: number,
  pairStep: number,
  scatter: number,
  rule: number,
  scratch: number,
  potential: number,
  residual: number,
  tangent: number,
) => void;

/** The same in TypeScript, one triangle at a time: the same operations in the same order. */
export const addPairsPlain =
  (views: Views): AddPairs =>
  (pairs, law, nodes, metric, pointStep, pairStep, scatter, rule, scratch, potential, residual, tangent) => {
    const { numbers, words } = views;
    const tensors = scratch / 8;
    for (let pair = 0; pair < pairs; pair++) {
      for (let lane = 0; lane < 2; lane++) {
        const at = {
          law: law / 8,
          nodes: nodes / 4 + 12 * pair + lane,
          metric: (metric + pairStep * pair) / 8 + lane,
          pointStep: pointStep / 8,
          rule: rule / 8,
          tensors,
          potential: potential / 8,
          residual: residual / 8,
        };
        addResidual(views, at);
        if (tangent === 0) continue;
        for (let part = 0; part < 3; part++) {
          formMoments(numbers, tensors + part, rule / 8, tensors + MOMENTS + 6 * part);
        }
        formMatrix(numbers, tensors + MOMENTS, tensors + MATRIX);
        const entries = scatter / 4 + 42 * pair + lane;
        for (let p = 0; p < 21; p++) numbers[tangent / 8 + words[entries + 2 * p]] += numbers[tensors + MATRIX + p];
      }
    }
  };

/** Places of what one triangle needs, by the numbers and words of `Views`. */
interface Places {
  readonly law: number;
  readonly nodes: number;
  readonly metric: number;
  readonly pointStep: number;
  readonly rule: number;
  readonly tensors: number;
  readonly potential: number;
  readonly residual: number;
}

/** Place of the piece of the law that holds b >= 0. */
function pieceAt(numbers: Float64Array, words: Int32Array, law: number, b: number): number {
  const cell = Math.min(b * numbers[law], numbers[law + 2]) + ROUNDER - ROUNDER;
  let piece = law + words[2 * law + 6 + cell] / 8;
  while (b >= numbers[piece + 5]) piece += 6;
  return piece;
}

/** Adds the residual of a triangle and leaves the weighted tangents of its points in `tensors`, three a point. */
function addResidual(
  { numbers, words }: Views,
  { law, nodes, metric, pointStep, rule, tensors, potential, residual }: Places,
): void {
  const a0 = numbers[potential + words[nodes]]; // taken off, so that a constant of A leaves no trace
  const a1 = numbers[potential + words[nodes + 2]] - a0;
  const a2 = numbers[potential + words[nodes + 4]] - a0;
  const a3 = numbers[potential + words[nodes + 6]] - a0;
  const a4 = numbers[potential + words[nodes + 8]] - a0;
  const a5 = numbers[potential + words[nodes + 10]] - a0;
  const alpha = 4 * a5 - a1;
  const beta = 4 * a4 - a2;
  const gamma = 4 * (a1 - 2 * a5);
  const delta = 4 * (a3 - a4 - a5);
  const epsilon = 4 * (a2 - 2 * a4);
  let rAlpha = 0;
  let rBeta = 0;
  let rGamma = 0;
  let rDelta = 0;
  let rEpsilon = 0;
  for (let q = 0; q < POINTS; q++) {
    const xi = numbers[rule + 6 * q];
    const eta = numbers[rule + 6 * q + 2];
    const weight = numbers[rule + 6 * q + 4];
    const at = metric + pointStep * q;
    const m11 = numbers[at];
    const m12 = numbers[at + 2];
    const m22 = numbers[at + 4];
    const overDet = numbers[at + 6];
    const g1 = alpha + (gamma * xi + delta * eta);
    const g2 = beta + (delta * xi + epsilon * eta);
    const h1 = m11 * g1 + m12 * g2;
    const h2 = m12 * g1 + m22 * g2;
    const b = Math.sqrt(Math.max((g1 * h1 + g2 * h2) * overDet, 0));
    const piece = pieceAt(numbers, words, law, b);
    const d = b - numbers[piece];
    const c1 = numbers[piece + 2];
    const c2d = numbers[piece + 3] * d;
    const c3dd = numbers[piece + 4] * (d * d);
    const h = numbers[piece + 1] + d * c1 + d * (c2d + c3dd);
    const slope = c1 + (c2d + c2d) + 3 * c3dd;
    const small = b < AT_REST;
    const overB = 1 / b;
    const nu = small ? numbers[law + 1] : h * overB;
    const spread = small ? 0 : (slope - nu) * overB * overB;
    const wNu = weight * nu;
    const wSpread = weight * spread * overDet;
    const s1 = wSpread * h1;
    const out = tensors + 3 * q;
    numbers[out] = wNu * m11 + s1 * h1;
    numbers[out + 1] = wNu * m12 + s1 * h2;
    numbers[out + 2] = wNu * m22 + wSpread * h2 * h2;
    const f1 = wNu * h1;
    const f2 = wNu * h2;
    rAlpha += f1;
    rBeta += f2;
    rGamma += xi * f1;
    rDelta += eta * f1 + xi * f2;
    rEpsilon += eta * f2;
  }
  const r1 = 4 * rGamma - rAlpha;
  const r2 = 4 * rEpsilon - rBeta;
  const r3 = 4 * rDelta;
  const r4 = 4 * (rBeta - rDelta - 2 * rEpsilon);
  const r5 = 4 * (rAlpha - rDelta - 2 * rGamma);
  numbers[residual + words[nodes]] -= r1 + r2 + (r3 + r4) + r5;
  numbers[residual + words[nodes + 2]] += r1;
  numbers[residual + words[nodes + 4]] += r2;
  numbers[residual + words[nodes + 6]] += r3;
  numbers[residual + words[nodes + 8]] += r4;
  numbers[residual + words[nodes + 10]] += r5;
}

/** Sums over the points of one entry of their tangents times 1, xi, eta, xi^2, xi eta, eta^2. */
function formMoments(numbers: Float64Array, tensors: number, rule: number, out: number): void {
  let [sum, x, y, xx, xy, yy] = [0, 0, 0, 0, 0, 0];
  for (let q = 0; q < POINTS; q++) {
    const xi = numbers[rule + 6 * q];
    const eta = numbers[rule + 6 * q + 2];
    const c = numbers[tensors + 3 * q];
    const cx = c * xi;
    const cy = c * eta;
    sum += c;
    x += cx;
    y += cy;
    xx += cx * xi;
    xy += cx * eta;
    yy += cy * eta;
  }
  numbers[out] = sum;
  numbers[out + 1] = x;
  numbers[out + 2] = y;
  numbers[out + 3] = xx;
  numbers[out + 4] = xy;
  numbers[out + 5] = yy;
}

/** The matrix of a triangle from the moments of its tangent, pairs of local nodes i >= j one after another. */
function formMatrix(numbers: Float64Array, moments: number, out: number): void {
  // Rows and columns alpha, beta, gamma, delta, epsilon; see `SteelTriangles`.
  const qx = numbers[moments + 7];
  const qy = numbers[moments + 8];
  const qxy = numbers[moments + 10];
  const aa = numbers[moments];
  const ab = numbers[moments + 6];
  const ac = numbers[moments + 1];
  const ad = numbers[moments + 2] + qx;
  const ae = qy;
  const bb = numbers[moments + 12];
  const bc = qx;
  const bd = qy + numbers[moments + 13];
  const be = numbers[moments + 14];
  const cc = numbers[moments + 3];
  const cd = numbers[moments + 4] + numbers[moments + 9];
  const ce = qxy;
  const dd = numbers[moments + 5] + numbers[moments + 15] + (qxy + qxy);
  const de = numbers[moments + 11] + numbers[moments + 16];
  const ee = numbers[moments + 17];

  // Corner 1: -alpha + 4 gamma; corner 2: -beta + 4 epsilon.
  const v1a = 4 * ac - aa;
  const v1b = 4 * bc - ab;
  const v1c = 4 * cc - ac;
  const v1d = 4 * cd - ad;
  const v1e = 4 * ce - ae;
  const k11 = 4 * v1c - v1a;
  const k21 = 4 * v1e - v1b;
  const k31 = 4 * v1d;
  const k41 = 4 * (v1b - v1d - (v1e + v1e));
  const k51 = 4 * (v1a - v1d - (v1c + v1c));
  const v2a = 4 * ae - ab;
  const v2b = 4 * be - bb;
  const v2c = 4 * ce - bc;
  const v2d = 4 * de - bd;
  const v2e = 4 * ee - be;
  const k22 = 4 * v2e - v2b;
  const k32 = 4 * v2d;
  const k42 = 4 * (v2b - v2d - (v2e + v2e));
  const k52 = 4 * (v2a - v2d - (v2c + v2c));
  // Middles: 4 delta; 4 (beta - delta - 2 epsilon); 4 (alpha - delta - 2 gamma).
  const v4a = ab - ad - (ae + ae);
  const v4b = bb - bd - (be + be);
  const v4c = bc - cd - (ce + ce);
  const v4d = bd - dd - (de + de);
  const v4e = be - de - (ee + ee);
  const v5a = aa - ad - (ac + ac);
  const v5c = ac - cd - (cc + cc);
  const v5d = ad - dd - (cd + cd);
  const k33 = 16 * dd;
  const k43 = 16 * v4d;
  const k44 = 16 * (v4b - v4d - (v4e + v4e));
  const k53 = 16 * v5d;
  const k54 = 16 * (v4a - v4d - (v4c + v4c));
  const k55 = 16 * (v5a - v5d - (v5c + v5c));
  // Corner 0: the rows sum to zero.
  const k10 = -(k11 + k21 + (k31 + k41) + k51);
  const k20 = -(k21 + k22 + (k32 + k42) + k52);
  const k30 = -(k31 + k32 + (k33 + k43) + k53);
  const k40 = -(k41 + k42 + (k43 + k44) + k54);
  const k50 = -(k51 + k52 + (k53 + k54) + k55);
  numbers[out] = -(k10 + k20 + (k30 + k40) + k50);
  numbers[out + 1] = k10;
  numbers[out + 2] = k11;
  numbers[out + 3] = k20;
  numbers[out + 4] = k21;
  numbers[out + 5] = k22;
  numbers[out + 6] = k30;
  numbers[out + 7] = k31;
  numbers[out + 8] = k32;
  numbers[out + 9] = k33;
  numbers[out + 10] = k40;
  numbers[out + 11] = k41;
  numbers[out + 12] = k42;
  numbers[out + 13] = k43;
  numbers[out + 14] = k44;
  numbers[out + 15] = k50;
  numbers[out + 16] = k51;
  numbers[out + 17] = k52;
  numbers[out + 18] = k53;
  numbers[out + 19] = k54;
  numbers[out + 20] = k55;
}
