import { MU0 } from '../base/constants.js';
import type { Point } from '../geometry/section.js';
import { POINT } from './conductors.js';
import { held, mm } from './drawing.js';
import { energyOf, pointOf } from './readings.js';
import type { VerificationCase } from './verification-case.js';

/** gamma = (4/pi) (q atan q - ln sqrt(1 + q^2)), q = s/(2 g): the gap's width that a slot of width s takes away, over g. */
export function carterGamma(slot: number, gap: number): number {
  const q = slot / (2 * gap);
  return (4 / Math.PI) * (q * Math.atan(q) - 0.5 * Math.log1p(q * q));
}

/** k_C = t/(t - gamma g) at the slot pitch t. */
export const carterFactor = (slot: number, gap: number, pitch: number): number =>
  pitch / (pitch - carterGamma(slot, gap) * gap);

/** Least over greatest flux density on the smooth face: 2 u/(1 + u^2), u = q + sqrt(1 + q^2). */
export function carterDip(slot: number, gap: number): number {
  const q = slot / (2 * gap);
  const u = q + Math.hypot(1, q);
  return (2 * u) / (1 + u * u);
}

/**
 * Half a slot pitch of ideal iron opposite a smooth face: the natural condition on all iron, flux lines at the slot's and
 * the tooth's middle, the flux between them that of 1 T under the tooth.
 */
export function slotOppositeSmoothFace(slot: number, gap: number, pitch: number): VerificationCase {
  const deep = 4 * slot; // the field falls as exp(-pi y/s) into the slot
  const half = pitch / 2;
  const flux = half / carterFactor(slot, gap, pitch);
  const corners: readonly Point[] = [
    [0, -deep],
    [slot / 2, -deep],
    [slot / 2, 0],
    [half, 0],
    [half, gap],
    [0, gap],
  ];
  const iron = { kind: 'crossing' } as const;
  return {
    name: `slot of ${mm(slot)} mm at a gap of ${mm(gap)} mm`,
    formula: 'k_C = t/(t - gamma g), gamma = (4/pi) (q atan q - ln sqrt(1 + q^2)); B_min/B_max = 2 u/(1 + u^2)',
    source: 'F. W. Carter, about 1901 to 1926 (from memory); numbers computed here',
    section: { outline: { kind: 'polygon', corners }, background: 'air', regions: [] },
    setup: {
      materials: { air: { kind: 'linear', muR: 1 } },
      edges: {
        'edge 1': iron,
        'edge 2': iron,
        'edge 3': iron,
        'edge 4': held(() => -flux),
        'edge 5': iron,
        'edge 6': { kind: 'closed' },
      },
    },
    probes: [
      { kind: 'point', name: 'slot', at: [0, gap] },
      { kind: 'point', name: 'tooth', at: [half, gap / 2] },
    ],
    accuracy: 1e-4,
    figures: [
      {
        // The energy is flux x potential difference/2, whence the gap that the flux sees.
        quantity: 'k_C by energy',
        expected: carterFactor(slot, gap, pitch),
        read: (answer) => {
          const { value, error } = energyOf(answer);
          const factor = (2 * MU0 * half) / (flux * flux * gap);
          return { value: factor * value, error: factor * error };
        },
      },
      {
        quantity: 'B on the smooth face under the slot, T',
        expected: carterDip(slot, gap),
        scale: 1,
        read: pointOf('slot', 'by'),
        bound: POINT,
      },
      { quantity: 'B under the tooth, T', expected: 1, read: pointOf('tooth', 'by'), bound: POINT },
    ],
  };
}
