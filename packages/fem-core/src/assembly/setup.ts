import { BEYOND_REGION, OUTSIDE_REGION } from '../geometry/unbounded.js';
import type { Material } from '../materials/material.js';

/** What happens on a side of the outline. Sides that are not named are closed. */
export type EdgeCondition =
  /** No flux crosses: A = 0. */
  | { readonly kind: 'closed' }
  /** The field crosses at right angles: H along the side is 0 (natural condition). */
  | { readonly kind: 'crossing' }
  /** A on this side is plus (repeating) or minus (reversing) A on the side it is matched with in the section. */
  | { readonly kind: 'repeating' }
  | { readonly kind: 'reversing' }
  /** A = Bx y - By x held on the side: a uniform field far away. */
  | {
      readonly kind: 'applied';
      /** Bx and By, T. */
      readonly field: readonly [bx: number, by: number];
    }
  /** A given as a function of place, Wb/m. */
  | {
      readonly kind: 'potential';
      /** A at (x, y) in metres, Wb/m. */
      readonly value: (x: number, y: number) => number;
    };

/** What fills the regions and binds the sides, by the names the section gave them. */
export interface Setup {
  /** Every region that covers any area must be named. */
  readonly materials: Readonly<Record<string, Material>>;
  /** Current density out of the page, A/m^2, by region; absent regions carry none. */
  readonly currentDensity?: Readonly<Record<string, number>>;
  /** Current out of the page through a whole region, A (turns x current), spread evenly over its area; adds to the density. */
  readonly current?: Readonly<Record<string, number>>;
  /** By side name; sides not named are closed. */
  readonly edges?: Readonly<Record<string, EdgeCondition>>;
}

/** What fills the region of that name: as set up, or vacuum round an open outline; undefined where nothing is said. */
export function materialOf(setup: Setup, region: string): Material | undefined {
  const open = region === OUTSIDE_REGION || region === BEYOND_REGION;
  return own(setup.materials, region) ?? (open ? VACUUM : undefined);
}

export const VACUUM: Material = { kind: 'linear', muR: 1 };

/** What a record holds under a name of its own: names such as `constructor` are found in every plain object. */
export function own<Value>(record: Readonly<Record<string, Value>> | undefined, name: string): Value | undefined {
  return record !== undefined && Object.hasOwn(record, name) ? record[name] : undefined;
}
