import type { CompiledKernels, KernelInstance } from '../kernels/instantiate.js';
import { instantiate } from '../kernels/instantiate.js';
import type { Analysis } from './analysis.js';
import type { ArenaLayout } from './arena-layout.js';
import { arenaLayout, RECORD_WORDS } from './arena-layout.js';
import { triangleSize } from './front-layout.js';

/** The kernels of wasm/cholesky.ts; all numbers but counts are byte addresses. */
interface Kernels {
  readonly placeRows: (records: number, frontCount: number) => void;
  readonly factorise: (
    records: number,
    frontCount: number,
    source: number,
    target: number,
    values: number,
    blocks: number,
    blocksEnd: number,
  ) => number;
  readonly solveOne: (records: number, frontCount: number, y: number, sums: number) => void;
  readonly solveFour: (records: number, frontCount: number, y: number) => void;
}

/** Memory with the kernels that work in it, laid out for one analysis at a time. */
export interface Arena {
  readonly kernels: CompiledKernels;
  readonly instance: KernelInstance<Kernels>;
  layout: ArenaLayout;
  /** The one whose index maps it holds. */
  analysis: Analysis;
}

/** An arena for the analysis: the given one, grown if need be, or a new one. Throws RangeError where memory is short. */
export function arenaFor(kernels: CompiledKernels, analysis: Analysis, reuse?: Arena): Arena {
  const old = reuse?.kernels === kernels ? reuse : undefined;
  if (old?.analysis === analysis) return old;
  const layout = arenaLayout(analysis);
  const arena = old ?? { kernels, instance: instantiate<Kernels>(kernels, layout.end), layout, analysis };
  const memory = arena.instance.reserve(layout.end);
  arena.layout = layout;
  arena.analysis = analysis;
  for (const map of ['rows', 'relative', 'source', 'target'] as const) {
    new Int32Array(memory, layout[map], analysis[map].length).set(analysis[map]);
  }
  new Float64Array(memory, layout.y, 4 * (analysis.pattern.n + 1)).fill(0);
  writeRecords(analysis, layout, new Uint32Array(memory, layout.records, RECORD_WORDS * analysis.below.length));
  arena.instance.exports.placeRows(layout.records, analysis.below.length);
  return arena;
}

/** What the kernels know of each front; see wasm/cholesky.ts, where `placeRows` adds how many rows are the parent's columns. */
function writeRecords(analysis: Analysis, layout: ArenaLayout, words: Uint32Array): void {
  const { first, below, child, sibling, rowStart, entryStart, blockStart, updateStart } = analysis;
  const recordOf = (s: number): number => (s < 0 ? 0 : layout.records + 4 * RECORD_WORDS * s);
  for (let s = 0, at = 0; s < below.length; s++, at += RECORD_WORDS) {
    words[at] = first[s + 1] - first[s];
    words[at + 1] = below[s];
    words[at + 2] = layout.blocks + 8 * blockStart[s];
    words[at + 3] = layout.updates + 8 * updateStart[s];
    words[at + 4] = layout.relative + 4 * rowStart[s];
    words[at + 5] = layout.rows + 4 * rowStart[s];
    words[at + 6] = entryStart[s + 1] - entryStart[s];
    words[at + 7] = recordOf(child[s]);
    words[at + 8] = recordOf(sibling[s]);
    words[at + 9] = layout.blocks + 8 * (blockStart[s] + triangleSize(first[s + 1] - first[s]));
    words[at + 11] = layout.offsets + 4 * rowStart[s];
  }
}
