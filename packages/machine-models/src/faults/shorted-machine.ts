import type { Winding } from '../machine.js';
import type { Series } from '../waves/series.js';
import { combine } from '../waves/series.js';
import { STARS } from '../winding/coil-places.js';

/** A machine whose terminals are joined, as its circuit sees it. */
export interface ShortedMachine {
  /** EMF of each phase, V against the electrical angle, at `speedRpm`; proportional to speed. */
  readonly emf: readonly Series[];
  /** Above 0. */
  readonly speedRpm: number;
  readonly poles: number;
  readonly phases: Winding['phases'];
  readonly connection: Winding['connection'];
  /** Of one phase with what leads to the short, ohm; above 0. */
  readonly resistance: number;
  /** Self less mutual, H, at least 0. */
  readonly inductance: number;
  /**
   * Of currents alike in all phases, self + (phases - 1) mutual, H; where it is not known, `inductance` stands for it. Only
   * a closed delta carries such currents.
   */
  readonly homopolarInductance?: number;
}

/** A part of a phase's EMF and the inductance that holds its current back. */
export interface Drive {
  /** V at `speedRpm`. */
  readonly emf: Series;
  /** H. */
  readonly inductance: number;
}

/**
 * What drives current through each phase when all terminals are joined.
 *
 * Star: no current leaves the neutral, so the mean of a star's EMFs (orders 3, 9, ... of three phases) drives none: the rest
 * of each phase's own does, against self less mutual inductance. Delta: each phase is shorted by itself; that mean drives
 * its current too, against the homopolar inductance.
 */
export function drivesOf(machine: ShortedMachine): readonly (readonly Drive[])[] {
  const { emf, phases, connection, inductance, homopolarInductance = inductance } = machine;
  const drives: Drive[][] = emf.map(() => []);
  for (const star of STARS[phases]) {
    const members = star.map((phase) => emf[phase]);
    const mean = combine(
      members,
      members.map(() => 1 / members.length),
    );
    for (const phase of star) {
      drives[phase].push({ emf: combine([emf[phase], mean], [1, -1]), inductance });
      if (connection === 'delta') drives[phase].push({ emf: mean, inductance: homopolarInductance });
    }
  }
  return drives;
}

/** Electrical angular frequency over mechanical speed in rpm, rad/s. */
export const electricalSpeed = (poles: number, rpm: number): number => ((poles / 2) * 2 * Math.PI * rpm) / 60;

/** Mechanical, rad/s. */
export const mechanicalSpeed = (rpm: number): number => (2 * Math.PI * rpm) / 60;
