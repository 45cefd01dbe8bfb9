import type { Mesh } from '../mesh/mesh.js';
import { longestEdge, triangleCount } from '../mesh/mesh.js';

/** Smallest share of its present size an element is asked to shrink to in one go. */
const SMALLEST = 0.25;

/**
 * Longest edges that would bring the summed error down to `target` with the fewest triangles. With elements of order p a
 * triangle's share of a functional's error falls with the power 2p of size per area of it; minimising the count
 * sum(r^-2) under sum(share r^2p) = target gives r = (c / share)^(1/(2p + 2)), the same share for every triangle.
 *
 * @param shares  Float64Array(m), not negative
 * @param most  triangles the next mesh may have, about; where the target asks for more, it is missed
 * @returns Float64Array(m), metres; Infinity where the present size will do
 */
export function wantedSizes(
  mesh: Mesh,
  shares: Float64Array,
  target: number,
  most = Infinity,
  order: 1 | 2 = 2,
): Float64Array {
  const m = triangleCount(mesh);
  const ratio = (c: number, share: number): number =>
    share <= 0 ? 1 : Math.min(1, Math.max(SMALLEST, (c / share) ** (1 / (2 * order + 2))));
  const total = (c: number): number => shares.reduce((sum, share) => sum + share * ratio(c, share) ** (2 * order), 0);
  const count = (c: number): number => shares.reduce((sum, share) => sum + ratio(c, share) ** -2, 0);
  let [low, high] = [0, shares.reduce((a, b) => Math.max(a, b), 0)];
  for (let i = 0; i < 50; i++) {
    const middle = 0.5 * (low + high);
    if (total(middle) <= target || count(middle) > most) low = middle;
    else high = middle;
  }
  const wanted = new Float64Array(m).fill(Infinity);
  for (let t = 0; t < m; t++) {
    const r = ratio(low, shares[t]);
    // An element asked for the limit ends up about 0.7 of it long, so mild wishes are met by the neighbours' refinement.
    if (r < 0.85) wanted[t] = 1.15 * r * longestEdge(mesh, t);
  }
  return wanted;
}
