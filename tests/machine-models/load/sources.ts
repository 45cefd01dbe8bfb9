import { phasesFromPeaks, type Source } from '../../../packages/machine-models/src/load/source.js';

/** 50.70 V rms at 420 rpm, 16 poles, 0.4713 ohm, 1.017 mH; star, no cable. */
export const hydro: Source = {
  phases: phasesFromPeaks([1], [50.7 * Math.SQRT2]),
  referenceRpm: 420,
  poles: 16,
  phaseResistance: 0.4713,
  phaseInductance: 1.017e-3,
  connection: 'star',
  cableResistance: 0,
};

/** The same with harmonics, triplen ones among them, and a cable. */
export const rich: Source = {
  ...hydro,
  phases: phasesFromPeaks([1, 3, 5, 7, 11], [71.7, 8, -5, 3, 1]),
  cableResistance: 0.1,
};

/** The same with three phases that differ: no sixth of the period is like another. */
export const uneven: Source = {
  ...rich,
  phases: rich.phases.map((phase, k) => ({ ...phase, sin: phase.sin.map((s, i) => s * (1 + 0.05 * k * i)) })),
};

/** One sinusoidal line voltage of peak 1 V behind 1 ohm and the given reactance (ohm) a phase. */
export function unitSource(reactance: number, peaks: readonly number[] = [1]): Source {
  const order = peaks.map((_, i) => 2 * i + 1);
  return {
    phases: phasesFromPeaks(
      order,
      peaks.map((peak) => peak / Math.sqrt(3)),
    ),
    referenceRpm: 60,
    poles: 2,
    phaseResistance: 1,
    phaseInductance: reactance / (2 * Math.PI),
    connection: 'star',
    cableResistance: 0,
  };
}
