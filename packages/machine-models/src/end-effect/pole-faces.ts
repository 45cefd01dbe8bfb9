import type { Machine } from '../machine.js';
import { magnetReach, segmentCount } from '../rotor/magnet-shape.js';
import { type Moments, polygonMoments } from './charged-face.js';
import type { GapModel } from './gap-model.js';

/**
 * Charged faces of one pole of the upper disc, the one that points along +y at x = 0. In the pole's frame x runs along
 * the circumference towards larger angles, z along its radius, from the shaft. The whole disc is this pole turned by 1,
 * 2, ... pole pitches, with alternating signs.
 */
export interface PoleFaces {
  readonly level: readonly LevelFace[];
  readonly upright: readonly UprightFace[];
}

/** A polygon at right angles to the shaft. */
export interface LevelFace {
  /** Float64Array(2n): x, z of its corners, counter-clockwise. */
  readonly xz: Float64Array;
  readonly y: number;
  /** Charge, T. */
  readonly density: number;
  readonly moments: Moments;
}

/** A rectangle with two sides along the shaft. */
export interface UprightFace {
  readonly from: readonly [x: number, z: number];
  readonly to: readonly [x: number, z: number];
  readonly low: number;
  readonly high: number;
  readonly density: number;
}

/** An upright prism magnetised evenly: axial along +y, tangential towards larger angles at its own axis, T. */
interface Prism {
  /** Of its axis, from the pole's, rad. */
  readonly angle: number;
  /** Outline in the frame of its own axis, symmetric in x, counter-clockwise. */
  readonly outline: Float64Array;
  readonly axial: number;
  readonly tangential: number;
  readonly back: number;
}

/** Longest chord that takes the place of an arc, rad. */
export const CHORD = 0.12;

/**
 * Faces of one pole. Outlines with arcs are cut finely into chords of at most `chord` radians, of the same area.
 *
 * @param chord rad; of a round magnet's own circle three times as much: the chords' error falls with the distance over
 *              their length, which is a matter of some millimetres there
 */
export function poleFaces(machine: Machine, model: GapModel, chord: number = CHORD): PoleFaces {
  const level: LevelFace[] = [];
  const upright: UprightFace[] = [];
  for (const prism of [...mainMagnets(machine, model, chord), ...interpoles(machine, model)]) {
    const xz = turned(prism.outline, prism.angle);
    const moments = polygonMoments(xz);
    if (prism.axial !== 0) {
      level.push({ xz, y: model.face, density: -prism.axial, moments });
      // On a plane of steel a charge and its image cancel.
      if (model.behind !== prism.back) level.push({ xz, y: prism.back, density: prism.axial, moments });
    }
    if (prism.tangential !== 0) upright.push(...sides(prism, xz, model.face));
  }
  return { level, upright };
}

function mainMagnets({ rotor }: Machine, { remanence, back }: GapModel, chord: number): Prism[] {
  const { magnets, poles } = rotor;
  const pieces = segmentCount(magnets);
  if (pieces === 1) {
    return [{ angle: 0, outline: magnetOutline(rotor, chord), axial: remanence, tangential: 0, back }];
  }
  const { inner, outer } = magnetReach(magnets);
  const outline = sectorOutline(inner, outer, Math.PI / (poles * pieces), chord);
  return Array.from({ length: pieces }, (_, k) => ({
    angle: (2 * Math.PI * k) / (poles * pieces),
    outline,
    axial: exact(Math.cos((k * Math.PI) / pieces)) * remanence,
    tangential: exact(Math.sin((k * Math.PI) / pieces)) * remanence,
    back,
  }));
}

const exact = (share: number): number => (Math.abs(share) < 1e-15 ? 0 : share);

function magnetOutline({ magnets, poles }: Machine['rotor'], chord: number): Float64Array {
  const { inner, outer } = magnetReach(magnets);
  switch (magnets.shape) {
    case 'block': {
      const half = magnets.width / 2;
      return Float64Array.of(-half, inner, half, inner, half, outer, -half, outer);
    }
    case 'sector':
      return sectorOutline(inner, outer, (magnets.arc * Math.PI) / poles, chord);
    case 'round': {
      const count = 2 * Math.ceil(Math.PI / (3 * chord));
      const step = (2 * Math.PI) / count;
      const radius = (magnets.diameter / 2) * sameArea(step);
      return Float64Array.from({ length: 2 * count }, (_, i) => {
        const angle = ((i >> 1) + 0.5) * step;
        return i % 2 === 0 ? radius * Math.cos(angle) : magnets.meanRadius + radius * Math.sin(angle);
      });
    }
  }
}

/** Corners of the polygon that has the area of the circle lie this much farther out: sqrt(step / sin step). */
const sameArea = (step: number): number => Math.sqrt(step / Math.sin(step));

function sectorOutline(inner: number, outer: number, half: number, chord: number): Float64Array {
  const count = Math.max(2, Math.ceil((2 * half) / chord));
  const step = (2 * half) / count;
  const corners: number[] = [];
  const arc = (radius: number, way: 1 | -1): void => {
    for (let i = 0; i <= count; i++) {
      const angle = way * (i * step - half);
      corners.push(radius * sameArea(step) * Math.sin(angle), radius * sameArea(step) * Math.cos(angle));
    }
  };
  arc(inner, 1);
  arc(outer, -1);
  return Float64Array.from(corners);
}

/** Pieces the sides of an interpole are cut into, where they are not straight. */
const SIDE_PIECES = 12;

/** The interpole beyond each pole, midway to the next: along the magnets' radial length, as deep as they at most. */
function interpoles(machine: Machine, { interpoleRemanence, interpoleBack, face }: GapModel): Prism[] {
  const { magnets, poles, interpoles: given } = machine.rotor;
  if (given === undefined || interpoleBack <= face) return [];
  const { inner, outer } = magnetReach(magnets);
  const count = magnets.shape === 'round' && given.width === 'fill' ? SIDE_PIECES : 1;
  const corners: number[] = [];
  for (let i = 0; i <= count; i++) {
    const radius = (inner + outer) / 2 - ((outer - inner) / 2) * Math.cos((Math.PI * i) / count);
    const room = Math.PI / poles - Math.asin(Math.min(1, trueWidth(magnets, poles, radius) / (2 * radius)));
    const half = given.width === 'fill' ? room : Math.min(room, Math.asin(Math.min(1, given.width / (2 * radius))));
    // On the right side; where no room is left the outline begins or ends in a hair.
    corners.push(radius * Math.sin(Math.max(half, NO_ROOM)), radius * Math.cos(half));
  }
  const outline: number[] = [];
  for (let i = count; i >= 0; i--) outline.unshift(corners[2 * i], corners[2 * i + 1]);
  for (let i = count; i >= 0; i--) outline.push(-corners[2 * i], corners[2 * i + 1]);
  return [
    {
      angle: Math.PI / poles,
      outline: Float64Array.from(outline),
      axial: 0,
      tangential: interpoleRemanence,
      back: interpoleBack,
    },
  ];
}

const NO_ROOM = 1e-5;

/** Twice the sine of the angle a magnet's side stands at, times the radius, m. */
function trueWidth(magnets: Machine['rotor']['magnets'], poles: number, radius: number): number {
  switch (magnets.shape) {
    case 'block':
      return magnets.width;
    case 'sector':
      return 2 * radius * Math.sin((magnets.arc * Math.PI) / poles);
    case 'round': {
      // Where the circle of this radius about the shaft leaves the magnet's own circle.
      const { meanRadius, diameter } = magnets;
      const cosine = (radius ** 2 + meanRadius ** 2 - diameter ** 2 / 4) / (2 * radius * meanRadius);
      return 2 * radius * Math.sqrt(Math.max(0, 1 - cosine ** 2));
    }
  }
}

/** Faces along the shaft: charge of tangential magnetisation. */
function sides({ angle, tangential, back }: Prism, xz: Float64Array, face: number): UprightFace[] {
  const faces: UprightFace[] = [];
  const count = xz.length / 2;
  for (let i = 0; i < count; i++) {
    const next = (i + 1) % count;
    const from = [xz[2 * i], xz[2 * i + 1]] as const;
    const to = [xz[2 * next], xz[2 * next + 1]] as const;
    const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
    // Outward normal of a counter-clockwise outline: (dz, -dx); tangential direction: (cos, -sin).
    const across = ((to[1] - from[1]) * Math.cos(angle) + (to[0] - from[0]) * Math.sin(angle)) / length;
    if (Math.abs(across) < 1e-12) continue;
    faces.push({ from, to, low: face, high: back, density: tangential * across });
  }
  return faces;
}

/** The outline turned towards larger angles. */
function turned(outline: Float64Array, angle: number): Float64Array {
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  return outline.map((value, i) => {
    const [x, z] = i % 2 === 0 ? [value, outline[i + 1]] : [outline[i - 1], value];
    return i % 2 === 0 ? x * c + z * s : z * c - x * s;
  });
}
