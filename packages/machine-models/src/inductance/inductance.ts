import type { Machine, Warning } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import { polynomialRadii } from '../rotor/slice-radii.js';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { legEnds } from '../winding/coil-window.js';
import type { SliceInductance } from './slice-inductance.js';
import { sliceInductance, turnsSquared } from './slice-inductance.js';
import type { Pair } from './whole-coils.js';
import { wholeCoils } from './whole-coils.js';

/** A figure by its parts, H. */
export interface InductanceParts {
  /** slices + endTurns. */
  readonly total: number;
  /** Straight legs, from the fields of the slices. */
  readonly slices: number;
  /** What the third dimension adds: end turns, and what the legs' ends change. */
  readonly endTurns: number;
  /** Estimated error of `slices` from the mesh, relative to it. */
  readonly slicesRelErr: number;
  /** Half width of the band about `endTurns` for what their model leaves out, H. */
  readonly endTurnsBand: number;
}

/** Of one phase, its paths in parallel; mean over the rotor's position. */
export interface Inductance {
  readonly self: InductanceParts;
  /** Of two phases of one star, mean over the pairs. */
  readonly mutual: InductanceParts;
  /** self - mutual: what a phase has where the currents of its star sum to nothing, mean over all such currents. */
  readonly phase: InductanceParts;
  /** Of the slices that were used, of overlapped windings of all, by rising radius. */
  readonly slices: readonly SliceInductance[];
  readonly warnings: readonly Warning[];
}

/** More slices than these are not needed for what varies so little along the radius. */
const ENOUGH = 5;

/**
 * Share of the end turns by which they may be off: the bundles' real section and course; those of overlapped windings pass
 * over each other. A judgement.
 */
const BUNDLES = { concentrated: 0.05, overlapped: 0.2 } as const;

/**
 * Self and mutual inductance of the phases.
 *
 * Slices: the polynomial through the slices' inductances per metre, integrated along the legs' own radial length (that of the
 * opening, of coils side by side); where the legs end beyond the magnets, the rotor is taken to go on as it is. A slanted leg
 * counts by its radial length: it is longer, and the waves across it are shorter by as much, which cancels but for a per cent.
 *
 * End turns: the whole coils in three dimensions less their straight legs, both under the same simpler assumptions
 * (`wholeCoils`).
 *
 * @param slices  solved, of one machine; of many, some are used
 * @throws Error for slices without a solution
 */
export function computeInductance(machine: Machine, slices: readonly SolvedSlice[]): Inductance {
  const { winding } = machine;
  const chosen = spread(slices);
  const { innerRadius, outerRadius } = legEnds(winding);
  const radii = chosen.map(({ answer }) => answer.radius);
  const weights = polynomialRadii(innerRadius, outerRadius, radii).map(({ weight }) => weight);
  const each = chosen.map((slice) => sliceInductance(machine, slice));
  // Overlapped: the legs' inductance is wanted of every slice.
  const others = winding.layout === 'overlapped' ? slices.filter((slice) => !chosen.includes(slice)) : [];
  const all = [...each, ...others.map((slice) => sliceInductance(machine, slice))];
  const coils = wholeCoils(machine);
  const of = (which: 'self' | 'mutual' | 'phase', from: (pair: Pair) => number): InductanceParts => {
    let [value, error] = [0, 0];
    each.forEach((slice, i) => {
      value += weights[i] * slice[which].value;
      error += Math.abs(weights[i]) * slice[which].error;
    });
    const endTurns = turnsSquared(winding) * (from(coils.whole) - from(coils.slices));
    const homopolar = turnsSquared(winding) * from(coils.homopolarBand);
    return {
      total: value + endTurns,
      slices: value,
      endTurns,
      slicesRelErr: value === 0 ? 0 : error / Math.abs(value),
      endTurnsBand: BUNDLES[winding.layout] * Math.abs(endTurns) + Math.abs(homopolar),
    };
  };
  const phase = of('phase', ({ self, mutual }) => self - mutual);
  return {
    self: of('self', ({ self }) => self),
    mutual: of('mutual', ({ mutual }) => mutual),
    phase,
    slices: all.sort((a, b) => a.radius - b.radius),
    warnings: warningsOf(machine, phase),
  };
}

/** At most `ENOUGH` slices, first and last among them, evenly by their order. */
function spread(slices: readonly SolvedSlice[]): readonly SolvedSlice[] {
  const count = Math.min(ENOUGH, slices.length);
  if (count <= 1) return slices;
  return Array.from({ length: count }, (_, i) => slices[Math.round((i * (slices.length - 1)) / (count - 1))]);
}

const KEY = 'winding.phase_inductance_H';
/** A band of more than this share of the phase inductance is told. */
const WIDE = 0.2;

function warningsOf({ rotor, winding }: Machine, phase: InductanceParts): Warning[] {
  const warnings: Warning[] = [];
  const { inner, outer } = magnetReach(rotor.magnets);
  const { innerRadius, outerRadius } = legEnds(winding);
  const beyond = Math.max(0, inner - innerRadius) + Math.max(0, outerRadius - outer);
  if (beyond > rotor.gap) {
    const text =
      `the legs reach ${(1000 * beyond).toFixed(1)} mm beyond the magnets; their inductance is worked out as if the rotor ` +
      'went on there';
    warnings.push({ key: KEY, text });
  }
  if (phase.endTurnsBand > WIDE * phase.total) {
    const [ends, band] = [phase.endTurns, phase.endTurnsBand].map((part) => ((100 * part) / phase.total).toFixed(0));
    const text =
      `the end turns make up ${ends} % of it; how they pass over each other and the steel beside them may change the whole ` +
      `by ${band} %`;
    warnings.push({ key: KEY, text });
  }
  return warnings;
}
