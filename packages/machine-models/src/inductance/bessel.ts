/**
 * J_0(x), J_1(x), ... into `out`, x at least 0, to some 1e-12: by J_(m-1) = (2 m/x) J_m - J_(m+1) from far above downwards,
 * scaled by J_0 + 2 J_2 + 2 J_4 + ... = 1 (J. C. P. Miller; in Abramowitz, Stegun, Handbook of Mathematical Functions, 1964,
 * 9.12; from memory). Orders so far above x that they are less than that are 0.
 */
export function besselOrders(x: number, out: Float64Array): void {
  out.fill(0);
  if (x === 0) {
    out[0] = 1;
    return;
  }
  const start = 2 * Math.ceil((x + 8 * Math.cbrt(x) + 24) / 2);
  const last = Math.min(out.length - 1, start);
  const slope = 2 / x;
  let above = 0;
  let here = 1e-250;
  let sum = 0;
  for (let m = start; m > 0; m--) {
    if (m <= last) out[m] = here;
    if (m % 2 === 0) sum += 2 * here;
    const below = m * slope * here - above;
    above = here;
    here = below;
    if (Math.abs(here) > 1e200) {
      above *= 1e-200;
      here *= 1e-200;
      sum *= 1e-200;
      for (let i = m; i <= last; i++) out[i] *= 1e-200;
    }
  }
  out[0] = here;
  const scale = 1 / (sum + here);
  for (let m = 0; m <= last; m++) out[m] *= scale;
}
