import { AIR, GRAVITY } from './air.js';

/** Heat transfer coefficients in W/(m^2 K), means over the surface, each by a published correlation for air. */

/**
 * A disc that turns in still air, mean over one face; R its radius (m), Re = omega R^2/nu:
 *
 *   laminar  Nu = h R/k = 0.36 Re^0.5                                       (C. Wagner, 1948)
 *   mixed    Nu = 0.015 Re^0.8 - 100 (r_c/R)^2,  r_c = sqrt(2.5e5 nu/omega)   (E. C. Cobb and O. A. Saunders, 1956, as J. F.
 *            Gieras, R.-J. Wang and M. J. Kamper give it in Axial Flux Permanent Magnet Brushless Machines; from memory)
 *
 * The greater one is taken: they cross at Re = 2.2e5, where transition is seen from about 2.4e5 on.
 */
export function rotatingDisc(radius: number, omega: number): number {
  const re = (omega * radius ** 2) / AIR.viscosity;
  if (re === 0) return 0;
  const mixed = 0.015 * re ** 0.8 - (100 * 2.5e5) / re;
  return (Math.max(0.36 * Math.sqrt(re), mixed) * AIR.conductivity) / radius;
}

/** Re up to which the flow along a plate is laminar. */
const PLATE_TRANSITION = 5e5;

/**
 * A plate of the length L (m) along which air is blown, Re = speed L/nu:  Nu = 0.664 Re^0.5 Pr^(1/3), beyond Re = 5e5
 * (0.037 Re^0.8 - 871) Pr^(1/3). Textbook (Incropera and DeWitt).
 */
export function forcedPlate(length: number, speed: number): number {
  const re = (speed * length) / AIR.viscosity;
  const along = re <= PLATE_TRANSITION ? 0.664 * Math.sqrt(re) : 0.037 * re ** 0.8 - 871;
  return (along * Math.cbrt(AIR.prandtl) * AIR.conductivity) / length;
}

/**
 * An upright plate of the height L (m) in still air, warmer than it by `rise` (K):
 *
 *   Nu = 0.68 + 0.670 Ra^(1/4) / (1 + (0.492/Pr)^(9/16))^(4/9),   Ra = g beta rise L^3 Pr/nu^2
 *
 * S. W. Churchill and H. H. S. Chu, Correlating equations for laminar and turbulent free convection from a vertical plate,
 * 1975 (from memory); for Ra up to 1e9.
 */
export function naturalPlate(height: number, rise: number): number {
  const rayleigh = (GRAVITY * AIR.expansion * Math.max(0, rise) * height ** 3 * AIR.prandtl) / AIR.viscosity ** 2;
  const shape = (1 + (0.492 / AIR.prandtl) ** (9 / 16)) ** (4 / 9);
  return ((0.68 + (0.67 * rayleigh ** 0.25) / shape) * AIR.conductivity) / height;
}
