import { EDGE, facePotential, placeEdges, placeRectangle } from './charged-face.js';
import type { GapModel } from './gap-model.js';
import type { LevelFace, PoleFaces, UprightFace } from './pole-faces.js';

/**
 * Images of a charge at y in the planes: charges of sign `side` at  shift + side y.
 *
 * A plane the field meets at right angles holds one potential, so it answers every charge by the opposite one behind
 * it, whichever way the magnet points. Two planes a distance L apart give an infinite stack of period 2 L.
 */
interface Image {
  readonly shift: number;
  readonly side: 1 | -1;
}

/** The stack ends where the fundamental of what is left out is below this share of a near charge's. */
const STACK_TOLERANCE = 1e-6;

/**
 * How the fundamental of a ring of alternating charges falls off a height D above it. In the ring's own harmonics
 * Q(p - 1/2) (chi), chi = 1 + D^2/(2 r^2), which falls like exp(-2 p asinh(D/2r)); farther off than r three more powers
 * of D/r: charges come in pairs of opposite sign, and it is a difference of potentials that counts.
 */
function fallOff(pairs: number, over: number): number {
  return Math.exp(-2 * pairs * Math.asinh(over / 2)) / (1 + over) ** 3;
}

/** @param radius the largest where the field is wanted, m */
function images({ behind, facing, poles }: GapModel, radius: number): Image[] {
  if (behind === undefined || facing === undefined) {
    const own: Image = { shift: 0, side: 1 };
    const plane = facing ?? behind;
    return plane === undefined ? [own] : [own, { shift: 2 * plane, side: -1 }];
  }
  const period = 2 * (behind - facing);
  let layers = 1;
  while (4 * fallOff(poles / 2, (layers * period) / radius) > STACK_TOLERANCE) layers++;
  const found: Image[] = [];
  for (let n = -layers; n <= layers; n++) {
    found.push({ shift: n * period, side: 1 }, { shift: 2 * facing + n * period, side: -1 });
  }
  return found;
}

/** Beyond this many times its reach a face is seen as its charge and second moments: within 4e-5 of the gap field. */
const FAR = 5;

/** What the winding's mean of By takes of one charge: potentials of it and its images, at one or two heights. */
interface Term {
  readonly image: Image;
  readonly y: number;
  readonly weight: number;
}

/** The terms of one face: how far it and its images lie above the heights, and their weights, charge and all. */
interface Stack {
  readonly rise: Float64Array;
  readonly weight: Float64Array;
}

function stackOf(terms: readonly Term[], y: number, density: number): Stack {
  return {
    rise: Float64Array.from(terms, (term) => term.image.shift + term.image.side * y - term.y),
    weight: Float64Array.from(terms, (term) => (term.image.side * term.weight * density) / (4 * Math.PI)),
  };
}

/** Share of one face of one pole in the mean of By, at x, z in the pole's frame, T. */
type Share = (x: number, z: number) => number;

function levelShare({ xz, y, density, moments }: LevelFace, terms: readonly Term[]): Share {
  const { rise, weight } = stackOf(terms, y, density);
  const { area, u, v, uu, uv, vv, reach } = moments;
  const far = (FAR * reach) ** 2;
  const count = xz.length / 2;
  const edges = new Float64Array(EDGE * count);
  return (x, z) => {
    const dx = u - x;
    const dz = v - z;
    const flat = dx * dx + dz * dz;
    const second = uu * dx * dx + 2 * uv * dx * dz + vv * dz * dz;
    let placed = false;
    let sum = 0;
    for (let i = 0; i < rise.length; i++) {
      const h = rise[i];
      const square = flat + h * h;
      if (square > far) {
        sum += weight[i] * farPotential(area, second, uu + vv, square);
        continue;
      }
      if (!placed) placeEdges(xz, x, z, edges);
      placed = true;
      sum += weight[i] * facePotential(edges, count, h);
    }
    return sum;
  };
}

function uprightShare({ from, to, low, high, density }: UprightFace, terms: readonly Term[]): Share {
  const { rise, weight } = stackOf(terms, (low + high) / 2, density);
  const height = high - low;
  const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
  const [ex, ez] = [(to[0] - from[0]) / length, (to[1] - from[1]) / length];
  const [u, v] = [(from[0] + to[0]) / 2, (from[1] + to[1]) / 2];
  const area = height * length;
  const [ll, hh] = [(area * length ** 2) / 12, (area * height ** 2) / 12];
  const far = FAR ** 2 * (length ** 2 / 4 + height ** 2 / 4);
  const edges = new Float64Array(EDGE * 4);
  return (x, z) => {
    const dx = u - x;
    const dz = v - z;
    const l = dx * ex + dz * ez;
    const off = dx * ez - dz * ex;
    const flat = dx * dx + dz * dz;
    let sum = 0;
    for (let i = 0; i < rise.length; i++) {
      const h = rise[i];
      const square = flat + h * h;
      if (square > far) {
        sum += weight[i] * farPotential(area, ll * l * l + hh * h * h, ll + hh, square);
        continue;
      }
      placeRectangle(l - length / 2, l + length / 2, h - height / 2, h + height / 2, edges);
      sum += weight[i] * facePotential(edges, 4, off);
    }
    return sum;
  };
}

/**
 * Integral of dS/R of a far face, to second moments:  A/R + (3 (d.I.d)/R^2 - tr I) / (2 R^3).
 *
 * @param second d.I.d, d the vector to the face's centre
 * @param trace  tr I
 * @param square R^2
 */
function farPotential(area: number, second: number, trace: number, square: number): number {
  const inverse = 1 / square;
  return Math.sqrt(inverse) * (area + 0.5 * inverse * (3 * second * inverse - trace));
}

/** By (T) averaged over the winding's thickness, at a radius (m) and an electrical angle (rad) from a magnet's axis. */
export type GapField = (radius: number, angle: number) => number;

/**
 * By averaged over the winding's thickness, of all poles at their real places.
 *
 * The mean of By = -dV/dy over a height is a difference of potentials over that height, so it is exact.
 *
 * @param radius the largest the field will be asked for, m
 * @returns      the field; it keeps scratch of its own between calls
 */
export function gapField(faces: PoleFaces, model: GapModel, radius: number): GapField {
  const { poles, windingFrom, windingTo, facing } = model;
  const thickness = windingTo - windingFrom;
  const terms = images(model, radius).flatMap(
    (image) =>
      [
        { image, y: windingTo, weight: -1 / thickness },
        { image, y: windingFrom, weight: 1 / thickness },
      ].filter(({ y }) => y !== facing), // there is no potential on a plane
  );
  const shares = [
    ...faces.level.map((face) => levelShare(face, terms)),
    ...faces.upright.map((face) => uprightShare(face, terms)),
  ];
  return (r, angle) => {
    let sum = 0;
    for (let pole = 0; pole < poles; pole++) {
      const off = (2 * (angle - pole * Math.PI)) / poles;
      const x = r * Math.sin(off);
      const z = r * Math.cos(off);
      let own = 0;
      for (const share of shares) own += share(x, z);
      sum += pole % 2 === 0 ? own : -own;
    }
    return sum;
  };
}

/**
 * Fundamental of a field that is even about a magnet's axis and changes sign from pole to pole, T: by midpoints over a
 * quarter period, right but for orders 4 stations - 1, 4 stations + 1 and higher.
 */
export function fundamentalOf(field: GapField, radius: number, stations: number): number {
  let sum = 0;
  for (let i = 0; i < stations; i++) {
    const angle = ((i + 0.5) * Math.PI) / (2 * stations);
    sum += field(radius, angle) * Math.cos(angle);
  }
  return (2 * sum) / stations;
}
