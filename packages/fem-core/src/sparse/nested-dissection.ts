import { compileKernels, instantiate } from '../kernels/instantiate.js';
import { bytes } from '../kernels/ordering.wasm.js';
import type { DissectionPlaces } from './dissection-steps.js';
import { dissectPlainly, PLACES, RECORD } from './dissection-steps.js';
import type { SymmetricPattern } from './pattern.js';

/** What the dissection knows of the n unknowns beyond their couplings; any content is safe, only fill depends on it. */
export interface Placement {
  /** Float64Array(2n): unknown i is at (points[2i], points[2i + 1]); unit and scale do not matter. */
  readonly points: Float64Array;
  /**
   * Int32Array(2n): a corner names itself twice, the middle unknown of an element's edge the unknowns at the edge's ends,
   * -1 for an end that is none (its value is fixed). If absent, all unknowns are taken for corners.
   */
  readonly ends?: Int32Array;
  /**
   * Float64Array(2n): shares of the two ends in a middle unknown where the field is linear; 1/2 if absent, -1/2 where signs
   * differ across a reversing side. Orders do not depend on it.
   */
  readonly weights?: Float64Array;
}

/** The kernel of wasm/ordering.ts; its twin is `dissectPlainly`. The places stand in the first words. Returns the nodes. */
type DissectWords = (n: number) => number;

const compiled = compileKernels(bytes);

/**
 * Fill-reducing order by nested dissection (George, Nested dissection of a regular finite element mesh, 1973). The graph of
 * the corners is cut in two again and again, by a line x = const or y = const; the exact sizes of the separators of all
 * cuts decide which. The separator is a minimum vertex cover of the links cut (Koenig, 1931). Middle unknowns then go as
 * deep into the tree of separators as their neighbours allow, so that every separator separates in the whole matrix.
 *
 * @returns Int32Array(n): order[k] is the unknown eliminated as number k
 */
export function dissectionOrder(pattern: SymmetricPattern, placement: Placement): Int32Array {
  const { words, places } = dissect(pattern, placement, true);
  return words.slice(places.order, places.order + pattern.n);
}

/** The same order without WebAssembly. */
export function plainDissectionOrder(pattern: SymmetricPattern, placement: Placement): Int32Array {
  const { words, places } = dissect(pattern, placement, false);
  return words.slice(places.order, places.order + pattern.n);
}

/**
 * A tree of separators, its nodes numbered from the root (0) so that those below node t are t + 1 ... last[t]. What two
 * nodes hold of which neither is below the other is not coupled.
 */
export interface SeparatorTree {
  /** Int32Array(t): node above, -1 for the root. */
  readonly parent: Int32Array;
  /** Int32Array(t). */
  readonly last: Int32Array;
  /** Int32Array(n): node of the tree that holds each unknown. */
  readonly nodeOf: Int32Array;
}

/** The tree behind `dissectionOrder`: what lies below a node is eliminated before it. */
export function separatorTree(pattern: SymmetricPattern, placement: Placement): SeparatorTree {
  const { words, places, nodes } = dissect(pattern, placement, true);
  const part = (from: number, count: number): Int32Array => words.slice(from, from + count);
  return {
    parent: part(places.parent, nodes),
    last: part(places.last, nodes),
    nodeOf: part(places.nodeOf, pattern.n),
  };
}

function dissect(
  pattern: SymmetricPattern,
  { points, ends }: Placement,
  useKernel: boolean,
): { readonly words: Int32Array; readonly places: DissectionPlaces; readonly nodes: number } {
  const { n, start, row } = pattern;
  const places = placesOf(n, row.length, ends !== undefined);
  const size = 4 * places.end;
  const kernels = useKernel && compiled ? instantiate<{ readonly dissect: DissectWords }>(compiled, size) : undefined;
  const buffer = kernels?.buffer() ?? new ArrayBuffer(size);
  const words = new Int32Array(buffer);
  words.set(PLACES.map((name) => places[name]));
  words.set(start, places.start);
  words.set(row, places.row);
  if (ends !== undefined) words.set(ends, places.ends);
  const coordinates = new Float64Array(buffer, 4 * places.points, 2 * n);
  coordinates.set(points);
  return { words, places, nodes: kernels?.exports.dissect(n) ?? dissectPlainly(words, coordinates, places, n) };
}

/** Where in the words each array begins, room for n corners among them; `ends` is -1 where all unknowns are corners. */
function placesOf(n: number, entries: number, hasEnds: boolean): DissectionPlaces {
  let at = 2 * ((PLACES.length + 1) >> 1); // coordinates fill two words each and begin at an even one
  const take = (count: number): number => {
    at += count;
    return at - count;
  };
  return {
    points: take(4 * n),
    ends: hasEnds ? take(2 * n) : -1,
    start: take(n + 1),
    row: take(entries),
    corners: take(n),
    numberOf: take(n),
    nodeOf: take(n),
    order: take(n),
    keys: take(n),
    spare: take(n),
    counts: take(2048),
    records: take(RECORD * n),
    byX: take(n),
    byY: take(n),
    ranks: take(2 * n),
    lines: take(4 * (n + 2)),
    parent: take(2 * n + 1),
    last: take(2 * n + 1),
    rank: take(2 * n + 1),
    next: take(2 * n + 2),
    lists: take(2 * (entries - n)),
    end: at,
  };
}
