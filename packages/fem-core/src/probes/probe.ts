import type { FieldValue } from '../field/values.js';
import type { Point } from '../geometry/section.js';

/** A wanted answer. Lengths in metres. */
export type Probe =
  | { readonly kind: 'point'; readonly name: string; readonly at: Point }
  /** `points` places equally spaced, ends included. */
  | { readonly kind: 'line'; readonly name: string; readonly from: Point; readonly to: Point; readonly points: number }
  /** Force and torque on the named regions together, torque about `about` (the origin if absent). */
  | { readonly kind: 'force'; readonly name: string; readonly on: readonly string[]; readonly about?: Point }
  /** turns x mean of A over the region. */
  | { readonly kind: 'linkage'; readonly name: string; readonly of: string; readonly turns: number }
  /** A(from) - A(to): positive along +y on a way to the right. */
  | { readonly kind: 'flux'; readonly name: string; readonly from: Point; readonly to: Point }
  | { readonly kind: 'mean'; readonly name: string; readonly over: readonly string[] };

/** Errors at a place: of A in Wb/m, of B in T, of H in A/m. */
export interface PlaceError {
  readonly a: number;
  readonly b: number;
  readonly h: number;
}

/**
 * What a probe found, SI per metre of depth. Each `error` bounds, in practice, what the mesh does to the figures, in their
 * unit; of vectors it is the length of the error.
 */
export type Answer =
  | {
      readonly kind: 'point';
      readonly name: string;
      /** Undefined where the point lies outside the section. */
      readonly value: FieldValue | undefined;
      readonly error: PlaceError;
    }
  | {
      readonly kind: 'line';
      readonly name: string;
      /** Distance of each place from the start, m. */
      readonly distance: readonly number[];
      readonly values: readonly (FieldValue | undefined)[];
      readonly errors: readonly PlaceError[];
    }
  | {
      readonly kind: 'force';
      readonly name: string;
      /** N/m. */
      readonly fx: number;
      readonly fy: number;
      /** N m/m. */
      readonly torque: number;
      readonly error: { readonly force: number; readonly torque: number };
    }
  /** Wb/m. */
  | { readonly kind: 'linkage'; readonly name: string; readonly linkage: number; readonly error: number }
  /** Wb/m; NaN where an end lies outside the section. */
  | { readonly kind: 'flux'; readonly name: string; readonly flux: number; readonly error: number }
  | {
      readonly kind: 'mean';
      readonly name: string;
      /** T: means of Bx, of By, and of |B|. */
      readonly bx: number;
      readonly by: number;
      readonly b: number;
      readonly error: number;
    };
