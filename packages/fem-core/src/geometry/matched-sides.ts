import type { Piece } from '../base/fault.js';
import { SNAP } from './limits.js';
import type { Point, Shape, SideChain } from './section.js';
import { boundsOf, cornersOf, sidesOf, sizeOf } from './shapes.js';

/** Two chains of sides of which one is the other translated. */
export interface MatchedSides {
  /** Numbers of the sides. */
  readonly from: readonly number[];
  readonly to: readonly number[];
  /** Carries `from` onto `to`, metres. */
  readonly shift: Point;
}

/** What is wrong with a pair, in words. */
export type Misfit = string | readonly Piece[];

export const fits = (found: MatchedSides | Misfit): found is MatchedSides =>
  typeof found === 'object' && 'from' in found;

/** The pair by numbers of sides, or what is wrong with it. */
export function matchSides(outline: Shape, [from, to]: readonly [SideChain, SideChain]): MatchedSides | Misfit {
  if (outline.kind === 'circle') return 'are no sides that can be matched: a circle has one side';
  const corners = cornersOf(outline);
  const names = new Map(sidesOf(outline).map((name, i) => [name, i]));
  const chains: Chain[] = [];
  for (const chain of [from, to]) {
    const found = chainOf(typeof chain === 'string' ? [chain] : chain, names, corners);
    if (typeof found === 'string') return found;
    chains.push(found);
  }
  const [p, q] = chains;
  const snap = 0.5 * SNAP * sizeOf(boundsOf(outline));
  const [start, end] = [corners[p.corners[0]], corners[p.corners[p.corners.length - 1]]];
  // Outlines run round, so as a rule the start of one chain meets the end of the other.
  for (const other of [[...q.corners].reverse(), q.corners]) {
    const [first, last] = [corners[other[0]], corners[other[other.length - 1]]];
    const shift: Point = [first[0] - start[0], first[1] - start[1]];
    if (Math.hypot(end[0] + shift[0] - last[0], end[1] + shift[1] - last[1]) > snap) continue;
    const astray =
      deviation(corners, p.corners, other, shift, snap) ??
      deviation(corners, other, p.corners, [-shift[0], -shift[1]], snap);
    if (astray === undefined) return { from: p.sides, to: q.sides, shift };
    return [
      `are not the same line translated: corner ${astray.corner + 1} at `,
      { metres: corners[astray.corner] },
      ' has nothing opposite, by ',
      { metres: Number(astray.off.toPrecision(3)) },
    ];
  }
  return 'are not sides of equal length and direction';
}

interface Chain {
  readonly sides: readonly number[];
  /** Numbers of its corners, in order round the outline. */
  readonly corners: readonly number[];
}

function chainOf(
  given: readonly string[],
  names: ReadonlyMap<string, number>,
  corners: readonly Point[],
): Chain | string {
  const unknown = given.find((name) => !names.has(name));
  if (unknown !== undefined) return `name no side '${unknown}'`;
  const count = corners.length;
  let sides = given.map((name) => names.get(name) as number);
  const follows = (step: number): boolean =>
    sides.every((side, i) => i === 0 || side === (sides[i - 1] + step) % count);
  if (!follows(1)) {
    if (!follows(count - 1)) return `are not sides that follow each other: ${given.join(', ')}`;
    sides = sides.reverse();
  }
  if (new Set(sides).size < sides.length || sides.length >= count) return 'go round the whole outline';
  return { sides, corners: [...sides, (sides[sides.length - 1] + 1) % count] };
}

/** The first corner of a chain whose image is not on the other chain at the same length along it. */
function deviation(
  points: readonly Point[],
  chain: readonly number[],
  other: readonly number[],
  shift: Point,
  snap: number,
): { readonly corner: number; readonly off: number } | undefined {
  const length = (p: Point, q: Point): number => Math.hypot(q[0] - p[0], q[1] - p[1]);
  let [k, behind, along] = [0, 0, 0]; // the piece of the other chain, the length before it, the length along this one
  for (let i = 0; i < chain.length; i++) {
    const at = points[chain[i]];
    if (i > 0) along += length(points[chain[i - 1]], at);
    let piece = length(points[other[k]], points[other[k + 1]]);
    while (k + 2 < other.length && along > behind + piece) {
      behind += piece;
      k++;
      piece = length(points[other[k]], points[other[k + 1]]);
    }
    const share = (along - behind) / piece;
    const [a, b] = [points[other[k]], points[other[k + 1]]];
    const off = Math.hypot(
      a[0] + share * (b[0] - a[0]) - at[0] - shift[0],
      a[1] + share * (b[1] - a[1]) - at[1] - shift[1],
    );
    if (!(off <= snap)) return { corner: chain[i], off };
  }
  return undefined;
}
