import type { Machine, Warning, Winding } from '../machine.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import { polynomialRadii } from '../rotor/slice-radii.js';
import type { SolvedSlice } from '../slices/solve-slice.js';
import { endRing, ringInductance } from './end-turns.js';
import type { SliceInductance } from './slice-inductance.js';
import { sliceInductance, turnsSquared } from './slice-inductance.js';

/** A figure by its parts, H. */
export interface InductanceParts {
  /** slices + endTurns. */
  readonly total: number;
  /** Straight legs, from the fields of the slices. */
  readonly slices: number;
  readonly endTurns: number;
  /** Estimated error of `slices` from the mesh, relative to it. */
  readonly slicesRelErr: number;
}

/** Of one phase, its paths in parallel. */
export interface Inductance {
  readonly self: InductanceParts;
  /** Between two phases of one star, mean over the pairs; negative where their coils drive flux through each other's backwards. */
  readonly mutual: InductanceParts;
  /** self - mutual: what a phase has where the currents of its star sum to nothing. */
  readonly phase: InductanceParts;
  readonly warnings: readonly Warning[];
}

/** More slices than these are not needed for what varies so little along the radius. */
const ENOUGH = 5;
/** Beyond this share of `phase` the rough part is told. */
const MUCH = 0.4;

/**
 * Self and mutual inductance of the phases, mean over the rotor's position.
 *
 * Slices: along the legs' own radial length (the opening's, of coils side by side) the polynomial through the slices'
 * inductances per metre is integrated; where legs end beyond the magnets, the rotor is taken to go on as it is. A leg that
 * slants counts by its radial length: that it is longer and its neighbours nearer cancel but for a per cent.
 *
 * End turns: both end parts of a coil joined to a ring in free space (`ringInductance`). End parts of different coils are
 * taken not to link each other, nor the legs, and the steel near them is left out.
 *
 * @param slices  solved; of many, some are used
 */
export function computeInductance(machine: Machine, slices: readonly SolvedSlice[]): Inductance {
  const { winding, rotor } = machine;
  const chosen = spread(slices);
  const { innerRadius, outerRadius } = legEnds(winding);
  const weights = polynomialRadii(
    innerRadius,
    outerRadius,
    chosen.map(({ answer }) => answer.radius),
  ).map(({ weight }) => weight);
  const each = chosen.map((slice) => sliceInductance(machine, slice));
  const coils = winding.coils / winding.phases;
  const ends = turnsSquared(winding) * coils * ringInductance(endRing(winding, rotor.poles));
  const of = (which: 'self' | 'mutual' | 'phase', endTurns: number): InductanceParts => {
    const value = sum(each.map((slice, i) => weights[i] * slice[which].value));
    const error = sum(each.map((slice, i) => Math.abs(weights[i]) * slice[which].error));
    return {
      total: value + endTurns,
      slices: value,
      endTurns,
      slicesRelErr: value === 0 ? 0 : error / Math.abs(value),
    };
  };
  const phase = of('phase', ends);
  return { self: of('self', ends), mutual: of('mutual', 0), phase, warnings: warningsOf(machine, phase, each) };
}

const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);

/** At most `ENOUGH` slices, first and last among them, evenly by their order. */
function spread(slices: readonly SolvedSlice[]): readonly SolvedSlice[] {
  const count = Math.min(ENOUGH, slices.length);
  if (count === 1) return slices;
  return Array.from({ length: count }, (_, i) => slices[Math.round((i * (slices.length - 1)) / (count - 1))]);
}

/** Radii between which the legs run. */
const legEnds = (winding: Winding): { readonly innerRadius: number; readonly outerRadius: number } =>
  winding.layout === 'concentrated' ? winding.opening : winding.legs;

function warningsOf({ rotor, winding }: Machine, phase: InductanceParts, _each: readonly SliceInductance[]): Warning[] {
  const warnings: Warning[] = [];
  const { inner, outer } = magnetReach(rotor.magnets);
  const { innerRadius, outerRadius } = legEnds(winding);
  const beyond = Math.max(0, inner - innerRadius) + Math.max(0, outerRadius - outer);
  if (beyond > rotor.gap) {
    const text =
      `the legs reach ${(1000 * beyond).toFixed(1)} mm beyond the magnets; their inductance is worked out as if the rotor ` +
      'went on there';
    warnings.push({ key: 'winding.phase_inductance_H', text });
  }
  if (phase.endTurns > MUCH * phase.total) {
    const share = (100 * phase.endTurns) / phase.total;
    const text =
      `${share.toFixed(0)} % of the phase inductance is that of the end turns, taken as rings in free space that do not link ` +
      'each other; take the figure as a guide';
    warnings.push({ key: 'winding.phase_inductance_H', text });
  }
  return warnings;
}
