import { MU0 } from '@gapwright/fem-core';
import type { Machine } from '../machine.js';

/*
 * A layer of thickness t about y = 0 that carries J = cos(k x) out of the page, 1 A/m^2 at the crest, alike over y. In the
 * layer A'' - k^2 A = -mu0, beyond it A'' = k^2 A, and both A and A' are continuous at y = +-t/2. Derived here.
 */

/**
 * A averaged over the layer in free space, Wb/m at the crest:  (mu0/k^2) (1 - (1 - exp(-k t))/(k t)).
 */
export function freeResponse(k: number, thickness: number): number {
  const x = k * thickness;
  // The difference loses all digits for thin layers: 1 - (1 - exp(-x))/x = x/2 - x^2/6 + x^3/24 - ...
  const share = x < 1e-3 ? x / 2 - (x * x) / 6 + x ** 3 / 24 : 1 - -Math.expm1(-x) / x;
  return (MU0 / (k * k)) * share;
}

/**
 * Beyond the layer, in free space, A = a exp(-k |y|) at the crest with  a = (mu0/k^2) sinh(k t/2),  Wb/m.
 *
 * @returns log a: a itself may be past all numbers where the exponential makes up for it
 */
export function logOfOutside(k: number, thickness: number): number {
  const half = (k * thickness) / 2;
  return Math.log(MU0 / (k * k)) + half + Math.log(-Math.expm1(-2 * half) / 2);
}

/**
 * What endlessly permeable plates at y = up and y = -down add to `freeResponse`, Wb/m (Infinity: no plate there):
 *
 *   (mu0/k^2) (1 - exp(-k t))^2/(2 k t) (exp(-k (2 up - t)) + exp(-k (2 down - t)) + 2 exp(-k (2 D - t))) / (1 - exp(-2 k D)),
 *   D = up + down; up and down at least t/2,
 *
 * for a wave exp(-k |y|) of the layer comes back from either plate, where A' = 0, again and again. No steel of any kind, there
 * or farther away, adds more.
 */
export function reactionOfPlates(k: number, thickness: number, up: number, down: number): number {
  const layer = -Math.expm1(-k * thickness);
  const reach = (distance: number): number => Math.exp(-k * (2 * distance - thickness));
  const returned = reach(up) + reach(down) + 2 * reach(up + down);
  return ((MU0 / (k * k)) * layer * layer * returned) / (2 * k * thickness * -Math.expm1(-2 * k * (up + down)));
}

/** How far above and below the mid-plane of the gap steel begins, m; Infinity where there is none. */
export function plates({ rotor, materials }: Machine): { readonly up: number; readonly down: number } {
  const { gap, magnets, disc, keeper } = rotor;
  const distance = (name: string | undefined, from: number): number =>
    name === undefined || materials[name].kind === 'nonmagnetic' ? Infinity : from;
  const up = distance(disc?.material, gap / 2 + magnets.thickness);
  return { up, down: keeper === undefined ? up : distance(keeper.material, gap / 2) };
}
