import type { Field } from '../field/field.js';
import { BEYOND_REGION } from '../geometry/unbounded.js';
import type { Trace } from './contours.js';
import { choosePatches, traceLevel } from './contours.js';
import { buildDrawingMesh, valuesAtPoints } from './drawing-mesh.js';

/** Lines of one value of A; between the lines of neighbouring values runs the same flux. */
export interface FieldLines {
  /** A on the lines, Wb/m. */
  readonly potential: number;
  /** The pieces. */
  readonly lines: readonly Trace[];
}

/**
 * Field lines at equal flux steps: the contours of A midway between `count` equal steps from its least to its greatest value,
 * higher values on the left of each line, so that B points along it. Unbounded space beyond the circle is left out; of a field
 * that is the same everywhere, there are none.
 */
export function fieldLines(field: Field, count: number): FieldLines[] {
  const { mesh, potential } = field;
  const drawing = buildDrawingMesh(mesh);
  const values = valuesAtPoints(drawing, potential);
  const patches = choosePatches(drawing, (t) => mesh.regionNames[mesh.triangleToRegion[t]] !== BEYOND_REGION);
  let [low, high] = [Infinity, -Infinity];
  for (const point of patches.corners) {
    low = Math.min(low, values[point]);
    high = Math.max(high, values[point]);
  }
  if (!(high > low)) return [];
  return Array.from({ length: count }, (_, k) => {
    const level = low + ((k + 0.5) / count) * (high - low);
    return { potential: level, lines: traceLevel(patches, values, level) };
  });
}
