/** A flat ring of one thickness, clamped along its inner edge, its outer edge free. */
export interface AnnularPlate {
  /** Radius of the clamped edge, m; above 0. */
  readonly clampRadius: number;
  /** Radius of the free edge, m; above the clamped one. */
  readonly outerRadius: number;
  /** m. */
  readonly thickness: number;
  /** Young's modulus, Pa. */
  readonly young: number;
  readonly poisson: number;
}

/** A force (N, at right angles to the plate) spread evenly along a circle; at the radius of the clamp or within it bends nothing. */
export interface RingLoad {
  readonly radius: number;
  readonly force: number;
}

/** Bending stiffness  D = E t^3 / (12 (1 - nu^2)),  Nm. */
export function plateStiffness({ thickness, young, poisson }: AnnularPlate): number {
  return (young * thickness ** 3) / (12 * (1 - poisson ** 2));
}

/**
 * Slope theta = dw/dr of the plate under one ring load F at radius s, in closed form. Plate theory of small deflections
 * (Timoshenko and Woinowsky-Krieger, Theory of Plates and Shells, symmetrical bending of circular plates; title from
 * memory):
 *
 *   theta'' + theta'/r - theta/r^2 = -W(r)/(2 pi r D),   W(r) the load outside r,
 *   theta(b) = 0 at the clamp,   theta'(a) + nu theta(a)/a = 0 at the free edge
 *
 * With k = F/(4 pi D), and r ln r the part that the load demands (its left-hand side is 2/r):
 *
 *   b < r < s:  theta = P r + Q/r - k r ln(r/s)
 *   s < r < a:  theta = C r + G/r,   G = C a^2 (1 + nu)/(1 - nu)   (no moment at the edge)
 *
 * theta and theta' go through at s:  P = C + k/2,  Q = G - k s^2/2;  theta(b) = 0 gives
 *
 *   C = k ((s^2 - b^2)/2 - b^2 ln(s/b)) / (b^2 + a^2 (1 + nu)/(1 - nu)).
 */
interface Bend {
  readonly k: number;
  readonly s: number;
  readonly p: number;
  readonly q: number;
  readonly c: number;
  readonly g: number;
}

function bendBy(plate: AnnularPlate, { radius: s, force }: RingLoad): Bend {
  const { clampRadius: b, outerRadius: a, poisson } = plate;
  const k = force / (4 * Math.PI * plateStiffness(plate));
  const ratio = (a * a * (1 + poisson)) / (1 - poisson);
  const c = (k * ((s * s - b * b) / 2 - b * b * Math.log(s / b))) / (b * b + ratio);
  const g = c * ratio;
  return { k, s, p: c + k / 2, q: g - (k * s * s) / 2, c, g };
}

/**
 * Deflection at a radius in m, towards where the forces point; 0 at the clamp and within it. Loads add up.
 *
 * @param radius  m, up to the outer radius
 */
export function plateDeflection(plate: AnnularPlate, loads: readonly RingLoad[], radius: number): number {
  const { clampRadius: b } = plate;
  if (radius <= b) return 0;
  let sum = 0;
  for (const load of loads) {
    if (load.radius <= b) continue; // on the clamp
    const { k, s, p, q, c, g } = bendBy(plate, load);
    const within = (r: number): number =>
      (p * r * r) / 2 + q * Math.log(r / b) - k * ((r * r * Math.log(r / s)) / 2 - (r * r) / 4);
    sum += within(Math.min(radius, s)) - within(b);
    if (radius > s) sum += (c * (radius * radius - s * s)) / 2 + g * Math.log(radius / s);
  }
  return sum;
}

/** Radial bending moment per metre of circumference, D (theta' + nu theta/r), Nm/m; positive where the loads' side is hollow. */
export function radialMoment(plate: AnnularPlate, loads: readonly RingLoad[], radius: number): number {
  const { clampRadius: b, poisson } = plate;
  let sum = 0;
  for (const load of loads) {
    if (load.radius <= b) continue;
    const { k, s, p, q, c, g } = bendBy(plate, load);
    const r = radius;
    const [theta, slope] =
      r < s
        ? [p * r + q / r - k * r * Math.log(r / s), p - q / (r * r) - k * (Math.log(r / s) + 1)]
        : [c * r + g / r, c - g / (r * r)];
    sum += slope + (poisson * theta) / r;
  }
  return plateStiffness(plate) * sum;
}

/** The largest bending stress, Pa: at the clamped edge, on the faces,  6 |M| / t^2. */
export function clampStress(plate: AnnularPlate, loads: readonly RingLoad[]): number {
  return (6 * Math.abs(radialMoment(plate, loads, plate.clampRadius))) / plate.thickness ** 2;
}
