/**
 * Residual and tangent of six-node triangles of steel, two at a time; src/assembly/steel-plain.ts is the twin in TypeScript
 * and gives the same bits. Arguments named after arrays are byte addresses; src/assembly/steel.ts tells their layout and the
 * equations.
 */

const POINTS: i32 = 7;

// A law: what comes before its list of cells.
const CELLS_PER_TESLA: usize = 0;
const SLOPE_AT_REST: usize = 8;
const LAST_CELL: usize = 16; // a number
const CELLS: usize = 24;

// A piece of a law.
const PIECE: usize = 48;
const START: usize = 0;
const C0: usize = 8;
const C1: usize = 16;
const C2: usize = 24;
const C3: usize = 32;
const END: usize = 40;

// Scratch, two numbers at a time: a row of six for each point, the moments of the tangents, the matrix.
const ROW: usize = 96;
const H1: usize = 0;
const H2: usize = 16;
const FLUX: usize = 32; // B, later H/B
const SPREAD: usize = 80; // (dH/dB - H/B)/B^2
const TENSOR: usize = 48; // three numbers, the last in the place of the spread
const MOMENTS: usize = 672;
const MATRIX: usize = 960;

/** Below it, in tesla, H/B is the slope of the curve at rest. */
const AT_REST: f64 = 1e-9;

/** 2^52: numbers of this size have no fraction. */
const ROUNDER: f64 = 4503599627370496;

/** The numbers at two places of an array, as one. */
function gather(array: usize, first: i32, second: i32): v128 {
  return v128.load64_lane(array + ((<usize>second) << 3), v128.load64_zero(array + ((<usize>first) << 3)), 1);
}

/** The numbers at one distance from two places, as one. */
function beside(first: usize, second: usize, at: usize): v128 {
  return v128.load64_lane(second + at, v128.load64_zero(first + at), 1);
}

function plus(a: v128, b: v128): v128 {
  return f64x2.add(a, b);
}

function minus(a: v128, b: v128): v128 {
  return f64x2.sub(a, b);
}

function times(a: v128, b: v128): v128 {
  return f64x2.mul(a, b);
}

/** Address of the piece of the law that holds b >= 0, from a cell near by. */
function pieceAt(law: usize, cell: i32, b: f64): usize {
  let piece = law + <usize>load<i32>(law + CELLS + ((<usize>cell) << 2));
  while (b >= load<f64>(piece + END)) piece += PIECE;
  return piece;
}

/**
 * Adds the residuals of so many pairs of triangles, and, where `tangent` is not 0, their tangents.
 *
 * @param nodes  Int32(12) a pair
 * @param metric  numbers in pairs, four a triangle or, where `pointStep` is not 0, four a point
 * @param pointStep  bytes from the metric of one point to the next
 * @param pairStep  bytes from the metric of one pair to the next
 * @param scatter  Int32(42) a pair
 * @param rule  of each point xi, eta and weight, each twice
 */
export function addPairs(
  pairs: i32,
  law: usize,
  nodes: usize,
  metric: usize,
  pointStep: usize,
  pairStep: usize,
  scatter: usize,
  rule: usize,
  scratch: usize,
  potential: usize,
  residual: usize,
  tangent: usize,
): void {
  const end = nodes + <usize>pairs * 48;
  for (; nodes < end; nodes += 48, metric += pairStep, scatter += 168) {
    // In three walks over the points: each is a short chain, so that a processor works on many points at once.
    findFlux(nodes, metric, pointStep, rule, scratch, potential);
    findReluctivity(law, scratch);
    findResiduals(metric, pointStep, rule, scratch, scratch + MATRIX);
    addTwice(scratch + MATRIX, nodes, 6, residual);
    if (tangent === 0) continue;
    for (let part: usize = 0; part < 3; part++) {
      formMoments(scratch + TENSOR + (part << 4), rule, scratch + MOMENTS + 96 * part);
    }
    formMatrix(scratch + MOMENTS, scratch + MATRIX);
    addTwice(scratch + MATRIX, scatter, 21, tangent);
  }
}

/** Adds values that stand two by two to the places given two by two: those of the first triangle, then those of the second. */
function addTwice(values: usize, places: usize, count: usize, array: usize): void {
  for (let lane: usize = 0; lane < 2; lane++) {
    for (let p: usize = 0; p < count; p++) {
      const at = array + ((<usize>load<i32>(places + (p << 3) + (lane << 2))) << 3);
      store<f64>(at, load<f64>(at) + load<f64>(values + (p << 4) + (lane << 3)));
    }
  }
}

/** Leaves h = M g and the flux density of each point in its row. */
function findFlux(nodes: usize, metric: usize, pointStep: usize, rule: usize, row: usize, potential: usize): void {
  const four = f64x2.splat(4);
  const two = f64x2.splat(2);
  const a0 = gather(potential, load<i32>(nodes, 0), load<i32>(nodes, 4));
  // From corner 0, so that a constant of A leaves no trace.
  const a1 = minus(gather(potential, load<i32>(nodes, 8), load<i32>(nodes, 12)), a0);
  const a2 = minus(gather(potential, load<i32>(nodes, 16), load<i32>(nodes, 20)), a0);
  const a3 = minus(gather(potential, load<i32>(nodes, 24), load<i32>(nodes, 28)), a0);
  const a4 = minus(gather(potential, load<i32>(nodes, 32), load<i32>(nodes, 36)), a0);
  const a5 = minus(gather(potential, load<i32>(nodes, 40), load<i32>(nodes, 44)), a0);
  const alpha = minus(times(four, a5), a1);
  const beta = minus(times(four, a4), a2);
  const gamma = times(four, minus(a1, times(two, a5)));
  const delta = times(four, minus(minus(a3, a4), a5));
  const epsilon = times(four, minus(a2, times(two, a4)));
  const last = rule + 48 * POINTS;
  for (let point = rule; point < last; point += 48, metric += pointStep, row += ROW) {
    const xi = v128.load(point, 0);
    const eta = v128.load(point, 16);
    const m12 = v128.load(metric, 16);
    const g1 = plus(alpha, plus(times(gamma, xi), times(delta, eta)));
    const g2 = plus(beta, plus(times(delta, xi), times(epsilon, eta)));
    const h1 = plus(times(v128.load(metric, 0), g1), times(m12, g2));
    const h2 = plus(times(m12, g1), times(v128.load(metric, 32), g2));
    const square = times(plus(times(g1, h1), times(g2, h2)), v128.load(metric, 48));
    v128.store(row, h1, H1);
    v128.store(row, h2, H2);
    v128.store(row, f64x2.sqrt(f64x2.pmax(f64x2.splat(0), square)), FLUX);
  }
}

/** Leaves H/B and (dH/dB - H/B)/B^2 in the row of each point. */
function findReluctivity(law: usize, row: usize): void {
  const atRest = f64x2.splat(AT_REST);
  const slopeAtRest = v128.load64_splat(law + SLOPE_AT_REST);
  const cellsPerTesla = v128.load64_splat(law + CELLS_PER_TESLA);
  const lastCell = v128.load64_splat(law + LAST_CELL);
  const end = row + ROW * POINTS;
  for (; row < end; row += ROW) {
    const b = v128.load(row, FLUX);
    // Rounded by the sum: its last bits are the whole number. What is no number goes to the last cell.
    const cells = plus(f64x2.pmin(lastCell, times(b, cellsPerTesla)), f64x2.splat(ROUNDER));
    const p = pieceAt(law, i32x4.extract_lane(cells, 0), f64x2.extract_lane(b, 0));
    const q = pieceAt(law, i32x4.extract_lane(cells, 2), f64x2.extract_lane(b, 1));
    const d = minus(b, beside(p, q, START));
    const c1 = beside(p, q, C1);
    const c2d = times(beside(p, q, C2), d);
    const c3dd = times(beside(p, q, C3), times(d, d));
    const h = plus(plus(beside(p, q, C0), times(d, c1)), times(d, plus(c2d, c3dd)));
    const slope = plus(plus(c1, plus(c2d, c2d)), times(f64x2.splat(3), c3dd));
    const small = f64x2.lt(b, atRest);
    const overB = f64x2.div(f64x2.splat(1), b);
    const nu = v128.bitselect(slopeAtRest, times(h, overB), small);
    v128.store(row, nu, FLUX);
    v128.store(row, v128.andnot(times(times(minus(slope, nu), overB), overB), small), SPREAD);
  }
}

/** Leaves the residuals of a pair in `out`, and the weighted tangent of each point in its row. */
function findResiduals(metric: usize, pointStep: usize, rule: usize, row: usize, out: usize): void {
  const four = f64x2.splat(4);
  const two = f64x2.splat(2);
  let rAlpha = f64x2.splat(0);
  let rBeta = f64x2.splat(0);
  let rGamma = f64x2.splat(0);
  let rDelta = f64x2.splat(0);
  let rEpsilon = f64x2.splat(0);
  const last = rule + 48 * POINTS;
  for (let point = rule; point < last; point += 48, metric += pointStep, row += ROW) {
    const xi = v128.load(point, 0);
    const eta = v128.load(point, 16);
    const weight = v128.load(point, 32);
    const h1 = v128.load(row, H1);
    const h2 = v128.load(row, H2);
    const wNu = times(weight, v128.load(row, FLUX));
    const wSpread = times(times(weight, v128.load(row, SPREAD)), v128.load(metric, 48));
    const s1 = times(wSpread, h1);
    v128.store(row, plus(times(wNu, v128.load(metric, 0)), times(s1, h1)), TENSOR);
    v128.store(row, plus(times(wNu, v128.load(metric, 16)), times(s1, h2)), TENSOR + 16);
    v128.store(row, plus(times(wNu, v128.load(metric, 32)), times(times(wSpread, h2), h2)), TENSOR + 32);
    const f1 = times(wNu, h1);
    const f2 = times(wNu, h2);
    rAlpha = plus(rAlpha, f1);
    rBeta = plus(rBeta, f2);
    rGamma = plus(rGamma, times(xi, f1));
    rDelta = plus(rDelta, plus(times(eta, f1), times(xi, f2)));
    rEpsilon = plus(rEpsilon, times(eta, f2));
  }
  const r1 = minus(times(four, rGamma), rAlpha);
  const r2 = minus(times(four, rEpsilon), rBeta);
  const r3 = times(four, rDelta);
  const r4 = times(four, minus(minus(rBeta, rDelta), times(two, rEpsilon)));
  const r5 = times(four, minus(minus(rAlpha, rDelta), times(two, rGamma)));
  const r0 = f64x2.neg(plus(plus(plus(r1, r2), plus(r3, r4)), r5));
  v128.store(out, r0, 0);
  v128.store(out, r1, 16);
  v128.store(out, r2, 32);
  v128.store(out, r3, 48);
  v128.store(out, r4, 64);
  v128.store(out, r5, 80);
}

/** Sums over the points of one entry of their tangents times 1, xi, eta, xi^2, xi eta, eta^2. */
function formMoments(tensor: usize, rule: usize, out: usize): void {
  let sum = f64x2.splat(0);
  let x = f64x2.splat(0);
  let y = f64x2.splat(0);
  let xx = f64x2.splat(0);
  let xy = f64x2.splat(0);
  let yy = f64x2.splat(0);
  const last = rule + 48 * POINTS;
  for (let point = rule; point < last; point += 48, tensor += ROW) {
    const xi = v128.load(point, 0);
    const eta = v128.load(point, 16);
    const c = v128.load(tensor);
    const cx = times(c, xi);
    const cy = times(c, eta);
    sum = plus(sum, c);
    x = plus(x, cx);
    y = plus(y, cy);
    xx = plus(xx, times(cx, xi));
    xy = plus(xy, times(cx, eta));
    yy = plus(yy, times(cy, eta));
  }
  v128.store(out, sum, 0);
  v128.store(out, x, 16);
  v128.store(out, y, 32);
  v128.store(out, xx, 48);
  v128.store(out, xy, 64);
  v128.store(out, yy, 80);
}

/** a - b - 2 c */
function lessTwice(a: v128, b: v128, c: v128): v128 {
  return minus(minus(a, b), plus(c, c));
}

/** 4 a - b */
function fourLess(a: v128, b: v128): v128 {
  return minus(times(f64x2.splat(4), a), b);
}

/** The matrices of a pair from the moments of their tangents, pairs of local nodes i >= j one after another. */
function formMatrix(moments: usize, out: usize): void {
  // Rows and columns alpha, beta, gamma, delta, epsilon; see src/assembly/steel.ts.
  const qx = v128.load(moments, 96 + 16);
  const qy = v128.load(moments, 96 + 32);
  const qxy = v128.load(moments, 96 + 64);
  const aa = v128.load(moments, 0);
  const ab = v128.load(moments, 96);
  const ac = v128.load(moments, 16);
  const ad = plus(v128.load(moments, 32), qx);
  const ae = qy;
  const bb = v128.load(moments, 192);
  const bc = qx;
  const bd = plus(qy, v128.load(moments, 192 + 16));
  const be = v128.load(moments, 192 + 32);
  const cc = v128.load(moments, 48);
  const cd = plus(v128.load(moments, 64), v128.load(moments, 96 + 48));
  const ce = qxy;
  const dd = plus(plus(v128.load(moments, 80), v128.load(moments, 192 + 48)), plus(qxy, qxy));
  const de = plus(v128.load(moments, 96 + 80), v128.load(moments, 192 + 64));
  const ee = v128.load(moments, 192 + 80);
  const four = f64x2.splat(4);
  const sixteen = f64x2.splat(16);

  // Corner 1: -alpha + 4 gamma; corner 2: -beta + 4 epsilon; their columns are the middles' too, hence by rows.
  const v1a = fourLess(ac, aa);
  const v1b = fourLess(bc, ab);
  const v1c = fourLess(cc, ac);
  const v1d = fourLess(cd, ad);
  const v1e = fourLess(ce, ae);
  const k11 = fourLess(v1c, v1a);
  const k21 = fourLess(v1e, v1b);
  const k31 = times(four, v1d);
  const k41 = times(four, lessTwice(v1b, v1d, v1e));
  const k51 = times(four, lessTwice(v1a, v1d, v1c));
  const v2a = fourLess(ae, ab);
  const v2b = fourLess(be, bb);
  const v2c = fourLess(ce, bc);
  const v2d = fourLess(de, bd);
  const v2e = fourLess(ee, be);
  const k22 = fourLess(v2e, v2b);
  const k32 = times(four, v2d);
  const k42 = times(four, lessTwice(v2b, v2d, v2e));
  const k52 = times(four, lessTwice(v2a, v2d, v2c));
  // Middles: 4 delta; 4 (beta - delta - 2 epsilon); 4 (alpha - delta - 2 gamma).
  const v4a = lessTwice(ab, ad, ae);
  const v4b = lessTwice(bb, bd, be);
  const v4c = lessTwice(bc, cd, ce);
  const v4d = lessTwice(bd, dd, de);
  const v4e = lessTwice(be, de, ee);
  const v5a = lessTwice(aa, ad, ac);
  const v5c = lessTwice(ac, cd, cc);
  const v5d = lessTwice(ad, dd, cd);
  const k33 = times(sixteen, dd);
  const k43 = times(sixteen, v4d);
  const k44 = times(sixteen, lessTwice(v4b, v4d, v4e));
  const k53 = times(sixteen, v5d);
  const k54 = times(sixteen, lessTwice(v4a, v4d, v4c));
  const k55 = times(sixteen, lessTwice(v5a, v5d, v5c));
  // Corner 0: the rows sum to zero.
  const k10 = f64x2.neg(plus(plus(plus(k11, k21), plus(k31, k41)), k51));
  const k20 = f64x2.neg(plus(plus(plus(k21, k22), plus(k32, k42)), k52));
  const k30 = f64x2.neg(plus(plus(plus(k31, k32), plus(k33, k43)), k53));
  const k40 = f64x2.neg(plus(plus(plus(k41, k42), plus(k43, k44)), k54));
  const k50 = f64x2.neg(plus(plus(plus(k51, k52), plus(k53, k54)), k55));
  v128.store(out, f64x2.neg(plus(plus(plus(k10, k20), plus(k30, k40)), k50)), 0);
  v128.store(out, k10, 16);
  v128.store(out, k11, 32);
  v128.store(out, k20, 48);
  v128.store(out, k21, 64);
  v128.store(out, k22, 80);
  v128.store(out, k30, 96);
  v128.store(out, k31, 112);
  v128.store(out, k32, 128);
  v128.store(out, k33, 144);
  v128.store(out, k40, 160);
  v128.store(out, k41, 176);
  v128.store(out, k42, 192);
  v128.store(out, k43, 208);
  v128.store(out, k44, 224);
  v128.store(out, k50, 240);
  v128.store(out, k51, 256);
  v128.store(out, k52, 272);
  v128.store(out, k53, 288);
  v128.store(out, k54, 304);
  v128.store(out, k55, 320);
}
