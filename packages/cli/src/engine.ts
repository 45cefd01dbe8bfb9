import type { PictureCopy } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import type { Machine, MachineResult, ReadOptions, ReadResult, SliceAnswer, Warning } from '@gapwright/machine-models';

/** The solved field of one slice, as the pictures and VTK files want it. */
export interface SliceField {
  readonly mesh: Mesh;
  /** Float64Array(n + e), Wb/m. */
  readonly potential: Float64Array;
  /** Float64Array(6m): |B| at the nodes of each triangle, T. */
  readonly magnitude: Float64Array;
  /** Float64Array(2m): B of each triangle, T. */
  readonly fluxDensity: Float64Array;
  /** Float64Array(m). */
  readonly relativePermeability: Float64Array;
  /** What completes the mesh to one pole pair, both discs. */
  readonly copies: readonly PictureCopy[];
  /** Lowest and highest y worth showing, m. */
  readonly heights: readonly [from: number, to: number];
}

export interface SolvedMachine {
  readonly result: MachineResult;
  readonly answers: readonly SliceAnswer[];
  /** Of `radii: auto`: whether the leg's flux settled within the accuracy; undefined where the radii were given. */
  readonly settled?: boolean;
  /** Worked out only when asked for: nothing but the files needs it. */
  readonly fieldOf: (index: number) => SliceField;
}

export interface SolveOptions {
  readonly version: string;
  readonly inputSha256: string;
  readonly warnings: readonly Warning[];
  readonly signal: AbortSignal;
  /** Called after each slice, in order. */
  readonly onSlice: (answer: SliceAnswer, index: number) => void;
}

/** What the commands ask of the models. */
export interface Engine {
  readonly read: (text: string, options: ReadOptions) => ReadResult;
  readonly solve: (machine: Machine, options: SolveOptions) => Promise<SolvedMachine>;
}
