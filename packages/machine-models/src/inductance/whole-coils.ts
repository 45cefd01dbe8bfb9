import type { Machine } from '../machine.js';
import { simpsonRadii } from '../rotor/slice-radii.js';
import { besselOrders } from './bessel.js';
import { coilWindow, windowWave } from './coil-window.js';
import { freeResponse, plates, reactionOfPlates } from './current-layer.js';
import { coilProducts } from './current-waves.js';

/** Self-inductance of a phase and mean mutual inductance of two of one star, one turn a coil in series, H. */
export interface Pair {
  readonly self: number;
  readonly mutual: number;
}

/** How finely the sums are taken. */
export interface Fineness {
  /** Waves shorter than 2 pi/this times the leg's width are left out. */
  readonly reach: number;
  /** Steps of k are this over the coil's outer radius. */
  readonly step: number;
  /** Steps of the radius are this times the leg's width. */
  readonly stations: number;
}

export const FINENESS: Fineness = { reach: 16, step: 0.6, stations: 0.1 };

/**
 * The whole coils in three dimensions and their straight legs by slices, both between endlessly permeable plates where steel
 * begins (none: free space), recoil 1: the difference is what the ends bring.
 *
 * The turns lie in planes across the shaft, so the current of a phase is the curl of its window's W (`coilWindow`), spread
 * evenly over the thickness t. Of every wave of the plane with wave number k, whatever its direction, the vector potential
 * averaged over the thickness is G(k) (`freeResponse`, `reactionOfPlates`) times the current, so that with the window's waves
 * round the shaft, w_m(r) S_m, and their Hankel transforms H_m(k) = integral of w_m J_m(k r) r dr,
 *
 *   whole  = 2 pi sum over all m of |S_m|^2 integral of f(k) H_m(k)^2 k dk,          f(k) = k^2 G(k)/t,
 *   slices = 2 pi sum over all m of |S_m|^2 integral of f(m/r) w_m(r)^2 r dr over the legs,
 *
 * Neumann's formula (F. E. Neumann, Allgemeine Gesetze der inducirten elektrischen Stroeme, 1845) in the waves of the plane,
 * with the coils' images in the plates. The second is the limit of the first for long legs. Derived here.
 */
export function wholeCoils(machine: Machine, fineness: Fineness = FINENESS): { readonly whole: Pair; readonly slices: Pair } {
  const { winding, rotor } = machine;
  const { thickness, legWidth } = winding;
  const { up, down } = plates(rotor);
  const density = (k: number): number =>
    (k * k * (freeResponse(k, thickness) + reactionOfPlates(k, thickness, up, down))) / thickness;
  const window = coilWindow(machine);
  const [inner, outer] = legEnds(machine);
  const outmost = window.radii[window.radii.length - 1];
  const highest = fineness.reach / legWidth;
  const products = coilProducts(winding, rotor.poles);
  const orders = Array.from({ length: Math.ceil(highest * outmost) }, (_, m) => m).filter(
    (m) => products[m % products.length].self > 0,
  );
  const stations = window.radii.slice(1).flatMap((to, i) => {
    const from = window.radii[i];
    if (to <= from) return [];
    const half = Math.max(1, Math.ceil((to - from) / (2 * fineness.stations * legWidth)));
    const onLegs = from >= inner && to <= outer;
    return simpsonRadii(from, to, 2 * half + 1).map((station) => ({ ...station, onLegs }));
  });
  const waves = stations.map(({ radius }) => {
    const profile = window.profile(radius);
    return orders.map((m) => windowWave(profile, m));
  });
  const whole = orders.map(() => 0);
  const bessel = new Float64Array(Math.ceil(highest * outmost) + 1);
  const count = 2 * Math.ceil((highest * outmost) / (2 * fineness.step)) + 1;
  for (const { radius: k, weight } of simpsonRadii(0, highest, count).slice(1)) {
    const transforms = orders.map(() => 0);
    stations.forEach(({ radius, weight: dr }, s) => {
      besselOrders(k * radius, bessel);
      for (let o = 0; o < orders.length; o++) transforms[o] += dr * radius * waves[s][o] * bessel[orders[o]];
    });
    for (let o = 0; o < orders.length; o++) whole[o] += weight * k * density(k) * transforms[o] ** 2;
  }
  const slices = orders.map((m, o) =>
    m === 0
      ? 0
      : stations.reduce(
          (sum, { radius, weight, onLegs }, s) =>
            onLegs ? sum + weight * radius * density(m / radius) * waves[s][o] ** 2 : sum,
          0,
        ),
  );
  const pairOf = (parts: readonly number[]): Pair => {
    let [self, mutual] = [0, 0];
    orders.forEach((m, o) => {
      const both = 2 * Math.PI * (m === 0 ? 1 : 2) * parts[o];
      self += both * products[m % products.length].self;
      mutual += both * products[m % products.length].mutual;
    });
    return { self, mutual };
  };
  return { whole: pairOf(whole), slices: pairOf(slices), zero: pairOf(whole.map((v, o) => (orders[o] === 0 ? v : 0))) } as never;
}

function legEnds({ winding }: Machine): readonly [inner: number, outer: number] {
  const { innerRadius, outerRadius } = winding.layout === 'concentrated' ? winding.opening : winding.legs;
  return [innerRadius, outerRadius];
}
