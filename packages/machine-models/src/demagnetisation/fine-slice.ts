import type { Field, SizeAt } from '@gapwright/fem-core';
import { solveSection } from '@gapwright/fem-core';
import type { Machine } from '../machine.js';
import type { PoleSection } from '../slices/pole-section.js';
import { buildPoleSection } from '../slices/pole-section.js';

/** A slice solved for the field within its magnets. */
export interface FineSlice {
  /** m. */
  readonly radius: number;
  readonly field: Field;
  readonly pole: PoleSection;
}

/**
 * Elements at the corners of a magnet and within it, as shares of the root of its area, and how they grow from the corners on:
 * H in the worst hundredth is then within 1 % of what it comes to on ever finer meshes.
 */
const CORNER = 0.03;
const WITHIN = 0.25;
const GROWTH = 0.5;

/**
 * The machine's slice at one radius, fine at the corners of its magnets: their worst hundredth lies there, in a part the
 * meshes for the field in the gap need not resolve.
 */
export function solveFineSlice(machine: Machine, radius: number): FineSlice {
  const pole = buildPoleSection(machine, radius);
  const sizeAt: SizeAt[] = [];
  const regions = pole.section.regions.map((region) => {
    const { name, shape } = region;
    if (!pole.magnetRegions.includes(name) || shape.kind !== 'rectangle') return region;
    const { from, to } = shape;
    const size = Math.sqrt((to[0] - from[0]) * (to[1] - from[1]));
    for (const x of [from[0], to[0]]) {
      if (pole.cuts.magnetAxis && x === pole.from) continue; // a cut, no corner
      for (const y of [from[1], to[1]]) sizeAt.push({ at: [x, y], maxEdge: CORNER * size, growth: GROWTH });
    }
    return { ...region, maxEdge: Math.min(WITHIN * size, region.maxEdge ?? Infinity) };
  });
  return { radius, field: solveSection({ ...pole.section, regions, sizeAt }, pole.setup), pole };
}
