import type { Drag, Rotor } from '../machine.js';
import { magnetReach, segmentCount } from '../rotor/magnet-shape.js';
import { AIR, GRAVITY } from '../thermal/air.js';

/** What friction is worked out from where the user gives no coefficients. */
export interface RotorSize {
  /** Largest radius of what turns, m. */
  readonly outerRadius: number;
  /** Of all that turns, kg. */
  readonly mass: number;
  /** Magnets stand proud of the discs and stir the air, which a closed ring of them does not. */
  readonly proud: boolean;
}

/** @param mass of discs and magnets, kg */
export function rotorSize({ disc, magnets, interpoles }: Rotor, mass: number): RotorSize {
  const outerRadius = Math.max(disc?.outerRadius ?? 0, magnetReach(magnets).outer);
  return { outerRadius, mass, proud: segmentCount(magnets) === 1 && interpoles?.width !== 'fill' };
}

/** Friction at one speed. */
export interface DragTorque {
  /** Nm. */
  readonly bearing: number;
  readonly windage: number;
  /** bearing + windage, Nm. */
  readonly torque: number;
  /** W. */
  readonly loss: number;
  /** Where the machine's file gives none. */
  readonly assumed?: string;
}

/** Common practice, judgements: shaft over the discs' radius; seal friction of one bearing over its bore squared, N/m. */
const SHAFT = 0.2;
const SEAL = 60;
const BEARINGS = 2;
/** Friction of a deep-groove ball bearing at its bore: makers' catalogues, from memory. */
const ROLLING = 0.0015;
/** What blocks that stand proud make of a smooth disc's windage; a judgement. */
const STIRRING = 2;

/** By the coefficients given:  bearing + windage omega^2. */
export function dragTorque(drag: Drag | undefined, size: RotorSize, omega: number): DragTorque {
  const turning = omega === 0 ? 0 : 1;
  const bearing = turning * (drag?.bearing ?? usualBearing(size));
  const windage = drag === undefined ? usualWindage(size, omega) : drag.windage * omega ** 2;
  const torque = bearing + windage;
  const figures = { bearing, windage, torque, loss: torque * omega };
  return drag === undefined ? { ...figures, assumed: assumption(size, bearing, windage) } : figures;
}

/** Two sealed ball bearings on a shaft of a fifth of the discs' radius that carry the rotor's weight, Nm. */
function usualBearing({ outerRadius, mass }: RotorSize): number {
  const bore = SHAFT * outerRadius;
  return BEARINGS * SEAL * bore ** 2 + (ROLLING * mass * GRAVITY * bore) / 2;
}

/**
 * Windage of two discs, Nm:  (C + C') rho omega^2 R^5 / 2,  Re = omega R^2/nu: both backs in free air, which make one disc,
 *
 *   C = 3.87 Re^-0.5, or 0.146 Re^-0.2 where that is more            (T. von Karman, 1921)
 *
 * and both faces towards the standing winding, which make one disc in a housing,
 *
 *   C' = 2.67 Re^-0.5, or 0.0622 Re^-0.2                             (H. Schlichting, Boundary-Layer Theory)
 *
 * all from memory; twice that where magnets stand proud.
 */
function usualWindage({ outerRadius, proud }: RotorSize, omega: number): number {
  const re = (Math.abs(omega) * outerRadius ** 2) / AIR.viscosity;
  if (re === 0) return 0;
  const moment = (laminar: number, turbulent: number): number =>
    Math.max(laminar / Math.sqrt(re), turbulent / re ** 0.2);
  const both = moment(3.87, 0.146) + moment(2.67, 0.0622);
  return (proud ? STIRRING : 1) * both * 0.5 * AIR.density * omega ** 2 * outerRadius ** 5;
}

function assumption({ outerRadius }: RotorSize, bearing: number, windage: number): string {
  return (
    `friction is not given and was taken by size: ${bearing.toPrecision(2)} Nm of two sealed ball bearings on a shaft of ` +
    `${(1000 * SHAFT * outerRadius).toFixed(0)} mm (common practice), ${windage.toPrecision(2)} Nm of windage (turning discs, ` +
    'published moment coefficients); either may be off by a factor of two: give operation.drag'
  );
}
