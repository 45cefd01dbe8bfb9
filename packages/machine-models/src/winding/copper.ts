/** Resistivity of annealed copper at 20 degC in ohm metre: 1/58 of 1e-6, IEC 60028 (100 % IACS). */
export const COPPER_RESISTIVITY_20C = 1 / 58e6;

/** Relative rise of the resistance per kelvin, referred to 20 degC, at constant mass: IEC 60028. */
export const COPPER_RESISTANCE_SLOPE = 0.00393;

/** kg/m^3, IEC 60028. */
export const COPPER_DENSITY = 8890;

/**
 * Resistivity of copper in ohm metre:  rho = (1/58e6) (1 + 0.00393 (T - 20)).
 *
 * @param temperature degC
 */
export function copperResistivity(temperature: number): number {
  return COPPER_RESISTIVITY_20C * (1 + COPPER_RESISTANCE_SLOPE * (temperature - 20));
}
