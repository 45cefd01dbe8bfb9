import type { Machine } from '../machine.js';
import { simpsonRadii } from '../rotor/slice-radii.js';
import type { Profile } from '../winding/coil-window.js';
import { coilWindow, legEnds, windowWave } from '../winding/coil-window.js';
import { besselOrders } from './bessel.js';
import { freeResponse, plates, reactionOfPlates } from './current-layer.js';
import type { CoilProducts } from './current-waves.js';
import { coilProducts } from './current-waves.js';

/** Self-inductance of a phase and mean mutual inductance of two of one star, one turn a coil, coils in series, H. */
export interface Pair {
  readonly self: number;
  readonly mutual: number;
}

/** How finely the sums are taken. */
export interface Fineness {
  /** Waves of k above this over the leg's width are left out. */
  readonly reach: number;
  /** Steps of k, over the reciprocal of the coil's outer radius. */
  readonly step: number;
  /** Steps of the radius, over the leg's width. */
  readonly station: number;
}

/** Within 0.1 % of the phase inductance on machines of ordinary proportions. */
export const FINENESS: Fineness = { reach: 12, step: 0.8, station: 0.2 };

/**
 * Share of what endless plates would add to m = 0 that real discs do, give or take as much: by finite differences in radius and
 * height on discs 10 mm thick about a winding from 87 to 169 mm, 0.14 (discs from 90 to 165 mm), 0.23 (20 to 165), 0.41 (60
 * to 200).
 */
const DISCS = 0.2;

export interface WholeCoils {
  /** In three dimensions, end turns and all. */
  readonly whole: Pair;
  /** Straight legs by slices, under the same assumptions. */
  readonly slices: Pair;
  /** By how much `whole` may be off for what the discs do to the flux of m = 0. */
  readonly homopolarBand: Pair;
}

/**
 * The whole coils in three dimensions and their straight legs by slices, both between endlessly permeable plates where steel
 * begins (none: free space), recoil 1: the difference is what the ends bring.
 *
 * The turns lie in planes across the shaft, so the current of a phase is the curl of its window's W (`coilWindow`), spread
 * evenly over the thickness t. Of a wave in the plane with wave number k, whatever its direction, the vector potential
 * averaged over the thickness is G(k) (`freeResponse`, `reactionOfPlates`) times the current density. So with the waves of the
 * window round the shaft, w_m(r), the coils' sums S_m, and the Hankel transforms H_m(k) = integral of w_m J_m(k r) r dr,
 *
 *   whole  = 2 pi sum over all m of |S_m|^2 integral of f(k) H_m(k)^2 k dk,         f(k) = k^2 G(k)/t,
 *   slices = 2 pi sum over all m of |S_m|^2 integral of f(m/r) w_m(r)^2 r dr  over the legs.
 *
 * The first is Neumann's formula (F. E. Neumann, Allgemeine Gesetze der inducirten elektrischen Stroeme, 1845) by plane waves,
 * with the coils' images in the plates (Maxwell); the second its limit for long legs. Derived here.
 *
 * The flux of m = 0 crosses the whole gap one way and has to come back round the discs: to it they are no plates without end
 * but lie across its way (`DISCS`).
 */
export function wholeCoils(machine: Machine, fineness: Fineness = FINENESS): WholeCoils {
  const { winding, rotor } = machine;
  const { thickness, legWidth } = winding;
  const { up, down } = plates(machine);
  const products = coilProducts(winding, rotor.poles);
  const stations = coilStations(machine, fineness.station);
  const outmost = Math.max(...stations.map(({ radius }) => radius));
  const highest = fineness.reach / legWidth;
  const orders = Array.from({ length: Math.ceil(highest * outmost) }, (_, m) => m).filter(
    (m) => products[m % products.length].self > 0,
  );
  const waves = stations.map(({ profile }) => Float64Array.from(orders, (m) => windowWave(profile, m)));
  const free = (k: number): number => (k * k * freeResponse(k, thickness)) / thickness;
  const steel = (k: number): number => (k * k * reactionOfPlates(k, thickness, up, down)) / thickness;

  const whole = new Float64Array(orders.length);
  let homopolar = 0;
  const bessel = new Float64Array(orders[orders.length - 1] + 1);
  const transforms = new Float64Array(orders.length);
  const steps = 2 * Math.ceil((highest * outmost) / (2 * fineness.step));
  for (const { radius: k, weight } of simpsonRadii(0, highest, steps + 1).slice(1)) {
    transforms.fill(0);
    stations.forEach(({ radius, weight: dr }, s) => {
      besselOrders(k * radius, bessel);
      for (let o = 0; o < orders.length; o++) transforms[o] += dr * radius * waves[s][o] * bessel[orders[o]];
    });
    const [inAir, bySteel] = [free(k), steel(k)];
    for (let o = 0; o < orders.length; o++) {
      const power = weight * k * transforms[o] ** 2;
      const share = orders[o] === 0 ? DISCS : 1;
      whole[o] += power * (inAir + share * bySteel);
      if (orders[o] === 0) homopolar += power * share * bySteel;
    }
  }
  const slices = orders.map((m, o) => {
    if (m === 0) return 0;
    let sum = 0;
    stations.forEach(({ radius, weight, onLegs }, s) => {
      if (onLegs) sum += weight * radius * (free(m / radius) + steel(m / radius)) * waves[s][o] ** 2;
    });
    return sum;
  });
  const overPhases = (parts: ArrayLike<number>): Pair => sumOverPhases(orders, parts, products);
  return {
    whole: overPhases(whole),
    slices: overPhases(slices),
    homopolarBand: overPhases(orders.map((m) => (m === 0 ? homopolar : 0))),
  };
}

interface Station {
  readonly radius: number;
  readonly weight: number;
  /** The stretch it stands for is one of the legs. */
  readonly onLegs: boolean;
  readonly profile: Profile;
}

/** Radii for sums over the coil, with their weights. */
function coilStations(machine: Machine, step: number): readonly Station[] {
  const { radii, profile } = coilWindow(machine);
  const { innerRadius, outerRadius } = legEnds(machine.winding);
  return radii.slice(1).flatMap((to, i) => {
    const from = radii[i];
    if (to <= from) return [];
    const pairs = Math.ceil((to - from) / (2 * step * machine.winding.legWidth));
    const onLegs = from >= innerRadius && to <= outerRadius;
    return simpsonRadii(from, to, 2 * pairs + 1).map(({ radius, weight }) => ({
      radius,
      weight,
      onLegs,
      profile: profile(radius),
    }));
  });
}

function sumOverPhases(orders: readonly number[], parts: ArrayLike<number>, products: readonly CoilProducts[]): Pair {
  let [self, mutual] = [0, 0];
  orders.forEach((m, o) => {
    const both = 2 * Math.PI * (m === 0 ? 1 : 2) * parts[o]; // m and -m
    const product = products[m % products.length];
    self += both * product.self;
    mutual += both * product.mutual;
  });
  return { self, mutual };
}
