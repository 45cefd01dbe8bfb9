/** A flat ring that turns about its axis. */
export interface TurningRing {
  /** Hole, m; 0: a solid disc. */
  readonly innerRadius: number;
  readonly outerRadius: number;
  /** kg/m^3. */
  readonly density: number;
  readonly poisson: number;
}

/** Stresses of a turning disc, Pa. */
export interface TurningStress {
  /** Hoop stress at the hole, the largest of all; of a solid disc that at its centre. */
  readonly hole: number;
  readonly rim: number;
  /** The largest radial stress, at sqrt(innerRadius outerRadius). */
  readonly radial: number;
}

/**
 * Stresses of a turning disc of one thickness, both edges free (textbook, theory of elasticity), w in rad/s:
 *
 *   hoop at the hole  (3+nu)/4 rho w^2 (a^2 + (1-nu)/(3+nu) b^2),   at the rim  rho w^2/4 ((1-nu) a^2 + (3+nu) b^2)
 *   largest radial    (3+nu)/8 rho w^2 (a - b)^2
 *   solid             (3+nu)/8 rho w^2 a^2 at the centre, both ways
 *
 * A hole, however small, doubles the stress of the solid disc's centre.
 */
export function turningStress(
  { innerRadius: b, outerRadius: a, density, poisson: nu }: TurningRing,
  w: number,
): TurningStress {
  const scale = density * w * w;
  const rim = (scale / 4) * ((1 - nu) * a * a + (3 + nu) * b * b);
  const radial = ((3 + nu) / 8) * scale * (a - b) ** 2;
  if (b === 0) return { hole: radial, rim, radial };
  return { hole: ((3 + nu) / 4) * scale * (a * a + ((1 - nu) / (3 + nu)) * b * b), rim, radial };
}

/**
 * Mean hoop stress that parts fixed to a ring add to it, Pa: half the ring in balance,
 *
 *   sigma = (centrifugal force of all parts / (2 pi)) / (thickness (a - b)).
 */
export function carriedStress(
  force: number,
  {
    innerRadius,
    outerRadius,
    thickness,
  }: { readonly innerRadius: number; readonly outerRadius: number; readonly thickness: number },
): number {
  return force / (2 * Math.PI * thickness * (outerRadius - innerRadius));
}
