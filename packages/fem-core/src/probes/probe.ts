import type { FieldValue } from '../field/values.js';
import type { Point } from '../geometry/section.js';

/** A wanted answer. Lengths in metres. */
export type Probe =
  /** The field at a place. */
  | {
      readonly kind: 'point';
      /** What the answer is called. */
      readonly name: string;
      /** The place. */
      readonly at: Point;
    }
  /** The field at places equally spaced along a line, ends included. */
  | {
      readonly kind: 'line';
      /** What the answer is called. */
      readonly name: string;
      /** Where the line starts. */
      readonly from: Point;
      /** Where it ends. */
      readonly to: Point;
      /** Number of places, 1 to 1,000,000. */
      readonly points: number;
    }
  /** Force and torque on regions together, see `forceOn`. */
  | {
      readonly kind: 'force';
      /** What the answer is called. */
      readonly name: string;
      /** Names of the regions. */
      readonly on: readonly string[];
      /** Point the torque is about; the origin if absent. */
      readonly about?: Point;
    }
  /** Linked flux of a region: turns x mean of A. */
  | {
      readonly kind: 'linkage';
      /** What the answer is called. */
      readonly name: string;
      /** Name of the region. */
      readonly of: string;
      /** Of the conductor that fills it; negative where it goes back. */
      readonly turns: number;
    }
  /** Flux through a line: A(from) - A(to), positive along +y on a way to the right. */
  | {
      readonly kind: 'flux';
      /** What the answer is called. */
      readonly name: string;
      /** Where the line starts. */
      readonly from: Point;
      /** Where it ends. */
      readonly to: Point;
    }
  /** Means of B over regions together. */
  | {
      readonly kind: 'mean';
      /** What the answer is called. */
      readonly name: string;
      /** Names of the regions. */
      readonly over: readonly string[];
    };

/** Estimated errors at a place; without meaning outside the section. */
export interface PlaceError {
  /** Of A, Wb/m. */
  readonly a: number;
  /** Length of the error of B, T. */
  readonly b: number;
  /** Length of the error of H, A/m. */
  readonly h: number;
}

/**
 * What a probe found, SI per metre of depth. Each `error` bounds, in practice, what the mesh does to the figures, in their
 * unit; of vectors it is the length of the error.
 */
export type Answer =
  | {
      readonly kind: 'point';
      /** Of the probe. */
      readonly name: string;
      /** Undefined where the point lies outside the section. */
      readonly value: FieldValue | undefined;
      /** Of the value. */
      readonly error: PlaceError;
    }
  | {
      readonly kind: 'line';
      /** Of the probe. */
      readonly name: string;
      /** Distance of each place from the start, m. */
      readonly distance: readonly number[];
      /** At each place; undefined outside the section. */
      readonly values: readonly (FieldValue | undefined)[];
      /** Of each value. */
      readonly errors: readonly PlaceError[];
    }
  | {
      readonly kind: 'force';
      /** Of the probe. */
      readonly name: string;
      /** Along x, N/m; NaN where `forceOn` gives none. */
      readonly fx: number;
      /** Along y, N/m; likewise. */
      readonly fy: number;
      /** Counter-clockwise, N m/m; likewise. */
      readonly torque: number;
      /** Of the figures. */
      readonly error: {
        /** Of the force, N/m. */
        readonly force: number;
        /** Of the torque, N m/m. */
        readonly torque: number;
      };
    }
  | {
      readonly kind: 'linkage';
      /** Of the probe. */
      readonly name: string;
      /** Wb per metre of depth, turns included. */
      readonly linkage: number;
      /** Of the linkage, Wb/m. */
      readonly error: number;
    }
  | {
      readonly kind: 'flux';
      /** Of the probe. */
      readonly name: string;
      /** Wb per metre of depth; NaN where an end lies outside the section. */
      readonly flux: number;
      /** Of the flux, Wb/m. */
      readonly error: number;
    }
  | {
      readonly kind: 'mean';
      /** Of the probe. */
      readonly name: string;
      /** Mean of Bx, T. */
      readonly bx: number;
      /** Mean of By, T. */
      readonly by: number;
      /** Mean of |B|, T. */
      readonly b: number;
      /** Of the means, T. */
      readonly error: number;
    };
