import { MU0 } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import type { RecoveredGradient } from '@gapwright/fem-core/goals';
import { recoverGradients, smoothParts } from '@gapwright/fem-core/goals';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { cornerCount, nodeCount, triangleCount, triangleNodes } from '@gapwright/fem-core/mesh';
import type { Factor } from '@gapwright/fem-core/sparse';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { logOfOutside } from './current-layer.js';
import type { Parts, PoleWaves } from './pole-waves.js';
import { buildPoleWaves, factorWaves, solveWaves } from './pole-waves.js';

/** What the rotor adds to the mean of A over the winding, for a current layer cos(k x) of 1 A/m^2. */
export interface Reaction {
  /** Of the same wave, mean over the rotor's position, Wb/m. */
  readonly value: number;
  /** Estimated error from the mesh. */
  readonly error: number;
}

/**
 * What magnets (as recoil material without remanence) and steel (chord reluctivity as the slice's own field left it) add to
 * the free-space field of current waves in the winding.
 *
 * With A0 the field of the layer in free space, known in closed form, and K the matrix of the section, K0 that of free space,
 * A = A0 + D where  K D = (K0 - K) A0 = s,  a source that lives in magnets and steel alone; and the linkage of the layer with
 * itself is
 *
 *   A K0 A0 = A0 K0 A0 + A0 s + s D.
 *
 * So the mesh bears on the last term alone, with the square of the field's error, and needs to resolve the waves no better
 * than they reach the magnets. A wave's own part of A is the same at every position of the rotor; what the rotor throws into
 * other waves averages to nothing over its position.
 *
 * @param orders  of the waves, whole waves round the shaft
 */
export function rotorReactions(solved: SolvedSlice, orders: readonly number[], poles: number): readonly Reaction[] {
  if (orders.length === 0) return [];
  const { pole } = solved;
  const waves = buildPoleWaves(solved);
  const sources = freeFieldSources(solved, orders, poles);
  const scale = pole.copies / (pole.polePitch * 2 * pole.windingTo);
  const solutions: Parts[] = [];
  let reuse: Factor | undefined;
  for (let step = 0; 2 * step <= poles; step++) {
    const which = orders.flatMap((order, k) => (fold(order, poles).step === step ? [k] : []));
    if (which.length === 0) continue;
    const phase = Math.PI * ((2 * step) / poles); // exactly pi for half a turn
    const factored = factorWaves(waves, phase, reuse);
    reuse = factored;
    const some = which.map((k) => sources[k].parts);
    solveWaves(waves, phase, factored, some).forEach((parts, i) => {
      solutions[which[i]] = parts;
    });
  }
  const errors = energiesOfGaps(solved, waves, solutions);
  return sources.map(({ parts, first }, k) => ({
    value: scale * (first + dot(parts.even, solutions[k].even) + dot(parts.odd, solutions[k].odd)),
    error: scale * errors[k],
  }));
}

/**
 * What a wave gains from pole to pole, in steps of 2 pi/poles from 0 to half a turn; and whether that is its mirror image's,
 * which runs the other way (for the reaction it is all one).
 */
function fold(order: number, poles: number): { readonly step: number; readonly mirrored: boolean } {
  const step = order % poles;
  return 2 * step <= poles ? { step, mirrored: false } : { step: poles - step, mirrored: true };
}

interface WaveSource {
  readonly parts: Parts;
  /** A0 s of both parts. */
  readonly first: number;
}

/** s = (K0 - K) A0 by nodes, and A0 s: integrals of (1/mu0 - nu) B0 . curl N over magnets and steel as drawn. */
function freeFieldSources({ field, pole }: SolvedSlice, orders: readonly number[], poles: number): WaveSource[] {
  const { mesh } = field;
  const nodes = nodeCount(mesh);
  const corners = new Int32Array(6);
  const list = orders.map((order) => {
    const k = (2 * Math.PI * order) / (poles * pole.polePitch);
    const parts = { even: new Float64Array(nodes), odd: new Float64Array(nodes) };
    return { k, log: logOfOutside(k, 2 * pole.windingTo), sign: fold(order, poles).mirrored ? -1 : 1, parts, first: 0 };
  });
  forEachSample(field, [...pole.steelRegions, ...pole.magnetRegions], (sample) => {
    const { x, y, grad } = sample;
    const less = sample.area * (1 / MU0 - sample.nu);
    if (less === 0) return;
    triangleNodes(mesh, sample.triangle, corners);
    for (const wave of list) {
      const { k, parts } = wave;
      // Even part A0 = a cos(k x) exp(-k |y|), odd part a sin(k x) exp(-k |y|); B = (dA/dy, -dA/dx).
      const slope = k * Math.exp(wave.log - k * Math.abs(y));
      const [along, across] = [slope * Math.cos(k * x), wave.sign * slope * Math.sin(k * x)];
      const up = y < 0 ? 1 : -1;
      for (let i = 0; i < 6; i++) {
        parts.even[corners[i]] += less * (up * along * grad[6 + i] - across * wave.sign * grad[i]);
        parts.odd[corners[i]] += less * (up * across * grad[6 + i] + wave.sign * along * grad[i]);
      }
      wave.first += 2 * less * slope * slope;
    }
  });
  return list;
}

const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i], 0);

/**
 * Energy norm, squared, of the error of each solution: integral of nu |recovered less element gradient|^2, both parts. The
 * products of a solution with itself come out too small by as much.
 */
function energiesOfGaps({ field }: SolvedSlice, { mesh }: PoleWaves, solutions: readonly Parts[]): readonly number[] {
  const m = triangleCount(mesh);
  const stiffness = new Float64Array(m); // integral of nu over the triangle
  forEachSample(field, 'all', (sample) => {
    stiffness[sample.triangle] += sample.area * sample.nu;
  });
  const functions = solutions.flatMap(({ even, odd }) => [even, odd]);
  const recovered = recoverGradients(mesh, smoothParts(field), functions);
  const gaps = functions.map((potential, k) => meanSquareGaps(mesh, potential, recovered[k]));
  const energyOf = (gap: Float64Array): number => dot(gap, stiffness);
  return solutions.map((_, k) => energyOf(gaps[2 * k]) + energyOf(gaps[2 * k + 1]));
}

/** By triangle (straight ones): mean over the middles of its edges of |recovered less element gradient|^2. */
function meanSquareGaps(mesh: Mesh, potential: Float64Array, recovered: RecoveredGradient): Float64Array {
  const { xy, triangles, triangleToEdge } = mesh;
  const corners = cornerCount(mesh);
  return Float64Array.from({ length: triangleCount(mesh) }, (_, t) => {
    const at = (i: number): readonly [x: number, y: number] => {
      const corner = 2 * triangles[3 * t + (i % 3)];
      return [xy[corner], xy[corner + 1]];
    };
    const [[x0, y0], [x1, y1], [x2, y2]] = [at(0), at(1), at(2)];
    const doubled = (x1 - x0) * (y2 - y0) - (x2 - x0) * (y1 - y0);
    const dx = [(y1 - y2) / doubled, (y2 - y0) / doubled, (y0 - y1) / doubled]; // of the barycentric coordinates
    const dy = [(x2 - x1) / doubled, (x0 - x2) / doubled, (x1 - x0) / doubled];
    const corner = [0, 1, 2].map((i) => potential[triangles[3 * t + i]]);
    const middle = [0, 1, 2].map((i) => potential[corners + triangleToEdge[3 * t + i]]);
    let sum = 0;
    for (let i = 0; i < 3; i++) {
      // In the middle opposite corner i the slopes of corner functions are -1, 1, 1 times, those of middles 2 times those of
      // the coordinates.
      const [j, k] = [(i + 1) % 3, (i + 2) % 3];
      const [li, lj, lk] = [
        2 * (middle[j] + middle[k]) - corner[i],
        2 * middle[i] + corner[j],
        2 * middle[i] + corner[k],
      ];
      const gx = recovered[12 * t + 3 + i] - (li * dx[i] + lj * dx[j] + lk * dx[k]);
      const gy = recovered[12 * t + 9 + i] - (li * dy[i] + lj * dy[j] + lk * dy[k]);
      sum += (gx * gx + gy * gy) / 3;
    }
    return sum;
  });
}
