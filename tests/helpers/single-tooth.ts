import type { Winding } from '../../packages/machine-models/src/machine.js';
import { starOfSlots } from '../../packages/machine-models/src/winding/coil-places.js';
import { distributionFactor, pitchFactor } from '../../packages/machine-models/src/winding/factors.js';

/**
 * Winding factor |kd kp| of concentrated coils exactly one slot wide, kp = sin(order pi poles / (2 coils)); the figure
 * the published tables give, before leg spread and the true span of an air-cored coil.
 */
export function singleToothWindingFactor(
  coils: number,
  poles: number,
  order: number,
  phases: Winding['phases'] = 3,
): number {
  const kd = distributionFactor(starOfSlots(coils, poles, phases), poles, order);
  return Math.abs(kd * pitchFactor((Math.PI * poles) / (2 * coils), order));
}
