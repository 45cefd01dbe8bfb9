/** |B| in T at the six nodes of each triangle, Float64Array(6m), from the gradient of A as recovered, Float64Array(12m). */
export function magnitudeOf(recovered: Float64Array): Float64Array {
  const magnitude = new Float64Array(recovered.length / 2);
  for (let t = 0; t < magnitude.length / 6; t++) {
    for (let k = 0; k < 6; k++) magnitude[6 * t + k] = Math.hypot(recovered[12 * t + k], recovered[12 * t + 6 + k]);
  }
  return magnitude;
}
