import { MU0 } from '../base/constants.js';
import type { Point, Section } from '../geometry/section.js';
import type { Material } from '../materials/material.js';
import type { Probe } from '../probes/probe.js';
import { FORCE, FORCE_BOUND, POINT } from './conductors.js';
import { AIR, allSides, box, held, mm, rectangularSection } from './drawing.js';
import { forceOf, pointOf } from './readings.js';
import type { Figure, VerificationCase } from './verification-case.js';

const SHEETS = 'equivalent current sheets on its sides; any electromagnetics text; number computed here';

/** A rectangle w x h magnetised along +y, recoil 1. */
interface BlockMagnet {
  readonly width: number;
  readonly height: number;
  /** T. */
  readonly remanence: number;
}

export const BLOCK: BlockMagnet = { width: 0.03, height: 0.01, remanence: 1.25 };

/** A of a magnet about the origin: sheets of Br/mu0 up its left side and down its right one. */
export function blockPotential({ width, height, remanence }: BlockMagnet, x: number, y: number): number {
  const sheet = (u: number): number => {
    const part = (v: number): number =>
      u === 0 && v === 0 ? 0 : v * Math.log(u * u + v * v) + 2 * Math.abs(u) * Math.atan2(v, Math.abs(u));
    return (-remanence / (4 * Math.PI)) * (part(y + height / 2) - part(y - height / 2));
  };
  return sheet(x + width / 2) - sheet(x - width / 2);
}

/** Its (Bx, By). */
export function blockField(
  { width, height, remanence }: BlockMagnet,
  x: number,
  y: number,
): readonly [bx: number, by: number] {
  const sheet = (u: number): readonly [number, number] => {
    const [over, under] = [y + height / 2, y - height / 2];
    const angle = u === 0 ? 0 : Math.atan(over / u) - Math.atan(under / u);
    const bx = Math.log((u * u + under * under) / (u * u + over * over)) / (4 * Math.PI);
    return [remanence * bx, (remanence * angle) / (2 * Math.PI)];
  };
  const [left, right] = [sheet(x + width / 2), sheet(x - width / 2)];
  return [left[0] - right[0], left[1] - right[1]];
}

const material = ({ remanence }: BlockMagnet): Material => ({
  kind: 'magnet',
  recoil: 1,
  remanence: [0, remanence],
});

const nameOf = ([x, y]: Point): string => `(${mm(x)}, ${mm(y)}) mm`;
const pointAt = (at: Point): Probe => ({ kind: 'point', name: nameOf(at), at });

/** Both components at a place, but for those that symmetry makes zero. */
function fieldFigures(at: Point, field: readonly [number, number], scale: number): Figure[] {
  return ([0, 1] as const).flatMap((i): Figure[] => {
    if (Math.abs(field[i]) < 1e-12) return [];
    const read = pointOf(nameOf(at), i === 0 ? 'bx' : 'by');
    const component = i === 0 ? 'Bx' : 'By';
    return [{ quantity: `${component} at ${nameOf(at)}, T`, expected: field[i], scale, read, bound: POINT }];
  });
}

const opened = (section: Section, space: 'held' | 'open'): Section =>
  space === 'open' ? { ...section, open: true } : section;

/** `space`: an exact potential held on a near outline, or unbounded air. */
export function blockMagnet(space: 'held' | 'open'): VerificationCase {
  const places: readonly Point[] = [
    [0, 0],
    [0, 0.01],
    [0, 0.015],
    [0.015, 0.01],
    [0.02, 0.012],
    [0.025, 0],
  ];
  const [, middle] = blockField(BLOCK, 0, 0);
  const section = rectangularSection([-0.04, -0.03], [0.04, 0.03], 'air', [
    box('magnet', [0, 0], BLOCK.width, BLOCK.height),
  ]);
  return {
    name: space === 'open' ? 'rectangular magnet in unbounded air' : 'rectangular magnet in air',
    formula: 'By of a sheet = (Br/(2 pi)) (atan((y + h/2)/u) - atan((y - h/2)/u)), u = x -+ w/2',
    source: SHEETS,
    section: opened(section, space),
    setup: {
      materials: { magnet: material(BLOCK), air: AIR },
      ...(space === 'open' ? {} : { edges: allSides(held((x, y) => blockPotential(BLOCK, x, y))) }),
    },
    probes: places.map(pointAt),
    accuracy: 1e-4,
    figures: places.flatMap((at) => fieldFigures(at, blockField(BLOCK, ...at), middle)),
  };
}

/** Pull between two blocks facing at a gap, N/m: each sheet K of the one gives K (A(top) - A(bottom)) of the other. */
export function facingPull(block: BlockMagnet, gap: number): number {
  const [low, high] = [gap + block.height / 2, gap + (3 * block.height) / 2]; // faces of the one, from the other's centre
  const sheet = (x: number): number => blockPotential(block, x, high) - blockPotential(block, x, low);
  return (block.remanence / MU0) * (sheet(block.width / 2) - sheet(-block.width / 2));
}

/** `wanted`: the field on the mid-plane, or the pull. */
export function facingMagnets(space: 'held' | 'open', wanted: 'field' | 'pull'): VerificationCase {
  const gap = 0.012;
  const shift = (gap + BLOCK.height) / 2;
  const potential = (x: number, y: number): number =>
    blockPotential(BLOCK, x, y - shift) + blockPotential(BLOCK, x, y + shift);
  const places = [0, 0.01, 0.015, 0.02].map((x): Point => [x, 0]);
  const midPlane = (x: number): number => 2 * blockField(BLOCK, x, shift)[1];
  const section = rectangularSection([-0.04, -0.035], [0.04, 0.035], 'air', [
    box('upper', [0, shift], BLOCK.width, BLOCK.height),
    box('lower', [0, -shift], BLOCK.width, BLOCK.height),
  ]);
  const common = {
    name: `${wanted === 'pull' ? 'pull between two magnets' : 'two magnets facing'}${space === 'open' ? ' in unbounded air' : ''}`,
    source: SHEETS,
    section: opened(section, space),
    setup: {
      materials: { upper: material(BLOCK), lower: material(BLOCK), air: AIR },
      ...(space === 'open' ? {} : { edges: allSides(held(potential)) }),
    },
  };
  if (wanted === 'field') {
    return {
      ...common,
      formula: 'By = 2 By of one magnet, by its sheets',
      probes: places.map(pointAt),
      accuracy: 1e-4,
      figures: places.flatMap((at) => fieldFigures(at, [0, midPlane(at[0])], midPlane(0))),
    };
  }
  const read = forceOf('upper', 'fy');
  return {
    ...common,
    formula: 'F = sum over the sheets of one of K (A(top) - A(bottom)) of the other, K = Br/mu0',
    probes: [{ kind: 'force', name: 'upper', on: ['upper'] }],
    accuracy: FORCE,
    figures: [{ quantity: 'pull, N/m', expected: -facingPull(BLOCK, gap), read, bound: FORCE_BOUND }],
  };
}

/** By at the centre of two blocks w x h, one on each of two plates without end, gap g between their faces, T. */
function betweenPlates({ width, height, remanence }: BlockMagnet, gap: number): number {
  const period = 2 * height + gap;
  let sum = (2 * height) / period;
  for (let n = 1; n <= 200; n++) {
    const amplitude = (2 / (n * Math.PI)) * Math.sin((2 * Math.PI * n * height) / period);
    sum += amplitude * (n % 2 === 0 ? 1 : -1) * Math.exp((-Math.PI * n * width) / period);
  }
  return remanence * sum;
}

export function magnetPairBetweenPlates(): VerificationCase {
  // The plates are the natural condition, and so are the far sides, which hold both plates at one scalar potential; the
  // stray field falls as exp(-pi x/32 mm), so 150 mm to the side is far.
  const gap = 0.012;
  const [far, high] = [0.15, gap / 2 + BLOCK.height];
  const at = (gap + BLOCK.height) / 2;
  return {
    name: 'magnet pair between iron plates',
    formula: 'By = Br (2 h/L + sum (2/(n pi)) sin(2 pi n h/L) (-1)^n exp(-pi n w/L)), L = 2 h + g',
    source: 'Fourier series of the images in the plates; computed here, checked against 40 000 images',
    section: rectangularSection([-far, -high], [far, high], 'air', [
      box('upper', [0, at], BLOCK.width, BLOCK.height),
      box('lower', [0, -at], BLOCK.width, BLOCK.height),
    ]),
    setup: {
      materials: { upper: material(BLOCK), lower: material(BLOCK), air: AIR },
      edges: allSides({ kind: 'crossing' }),
    },
    probes: [pointAt([0, 0])],
    accuracy: 1e-3,
    figures: [
      {
        quantity: 'By at the centre, T',
        expected: betweenPlates(BLOCK, gap),
        read: pointOf(nameOf([0, 0]), 'by'),
        bound: POINT,
      },
    ],
  };
}
