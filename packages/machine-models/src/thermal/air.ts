/**
 * Air at 300 K and atmospheric pressure: Incropera and DeWitt, Fundamentals of Heat and Mass Transfer, tables (from memory).
 * From 0 to 80 degC heat transfer by the correlations here changes by a tenth at most.
 */
export const AIR = {
  /** W/(m K). */
  conductivity: 0.0263,
  /** Kinematic, m^2/s. */
  viscosity: 1.589e-5,
  prandtl: 7.07e-1,
  /** kg/m^3. */
  density: 1.1614,
  /** Relative expansion per kelvin. */
  expansion: 1 / 300,
} as const;

/** m/s^2. */
export const GRAVITY = 9.80665;
