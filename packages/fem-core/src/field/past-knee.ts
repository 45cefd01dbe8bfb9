import { materialOf } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { evaluateDemagnetisation } from '../materials/demagnetisation.js';
import { directionAt } from '../materials/direction.js';
import type { Field } from './field.js';
import { forEachSample } from './integrals.js';

/** Where a magnet with a demagnetisation curve works. */
export interface KneeReport {
  /** Share of its area past the knee: where the curve is more than twice as steep as its recoil line. */
  readonly share: number;
  /** Lowest H along the magnetisation, A/m. */
  readonly lowest: number;
}

/** How far a region's magnet is driven past the knee of its curve; undefined for all but magnets with a curve. */
export function pastKnee(field: Field, region: string): KneeReport | undefined {
  const material = materialOf(field.setup, region);
  if (material?.kind !== 'directed-magnet' || typeof material.along === 'number') return undefined;
  const { along, direction, recoil } = material;
  const point = { h: 0, slope: 0, energy: 0 };
  let [area, past, lowest] = [0, 0, 0];
  forEachSample(field, [region], (s) => {
    const angle = directionAt(direction, s.x, s.y);
    evaluateDemagnetisation(along, Math.cos(angle) * s.bx + Math.sin(angle) * s.by, point);
    area += s.area;
    if (point.slope * 2 * MU0 * recoil < 1) past += s.area;
    lowest = Math.min(lowest, point.h);
  });
  return { share: area === 0 ? 0 : past / area, lowest };
}
