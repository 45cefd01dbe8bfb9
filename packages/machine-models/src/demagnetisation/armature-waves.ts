import type { RotorCurrent } from '../faults/rotor-current.js';
import type { Machine } from '../machine.js';
import { coilPlaces, phaseLags } from '../winding/coil-places.js';
import { coilSum, phaseAxis } from '../winding/factors.js';
import { legCut } from '../winding/leg-cut.js';

export interface Complex {
  readonly re: number;
  readonly im: number;
}

/**
 * A wave of balanced currents round the shaft, `order` whole waves. With the currents Re(z exp(j (theta - lag))) in the phases,
 * theta electrical and 0 where a magnet along +y stands on the axis of phase 1, the current density in the winding is
 *
 *   Re(exp(i order s) (conj(z) exp(-i theta) along + z exp(i theta) against)),   s the angle round the shaft.
 */
export interface ArmatureWave {
  readonly order: number;
  /** 1/m^2. */
  readonly along: Complex;
  readonly against: Complex;
}

export interface ArmatureWaves {
  /** By rising order; that of as many waves as pole pairs is one of them and stands still to the rotor. */
  readonly waves: readonly ArmatureWave[];
  readonly polePairs: number;
  /** Angle round the shaft of a magnet along +y at theta = 0. */
  readonly start: number;
  /** Pole pairs after which the winding repeats. */
  readonly period: number;
}

/** Waves are followed to so many times the number of legs or poles: shorter ones do not reach the magnets. */
const REACH = 4;
/** Waves weaker than this share of the strongest at the magnets' faces are left out. */
const NEGLIGIBLE = 0.01;

/**
 * The waves of the winding at a radius. With c_am those of one turn a leg of phase a (see `currentWaves` of the inductance),
 *
 *   along = (turns/(paths t)) sum over a of c_am exp(+j lag_a),   against  the same with exp(-j lag_a),
 *   c_am = (1/P) (sin(s)/s) 2i sin(m h) S_am,   s = m b/(2 r),
 *
 * t the winding's thickness, over which turns are spread evenly, P the circumference, b the leg's width, h half the coil's
 * span, S_am the sum of its coils' sense exp(-i m axis).
 */
export function armatureWaves({ winding, rotor }: Machine, radius: number): ArmatureWaves {
  const { poles, magnets, gap } = rotor;
  const polePairs = poles / 2;
  const places = coilPlaces(winding, poles);
  const lags = phaseLags(winding.phases);
  const { halfSpan, width } = legCut(winding, poles, magnets.meanRadius, radius);
  const perAmpere = winding.turns / (winding.paths * winding.thickness * Math.PI * radius);
  const waveOf = (order: number): ArmatureWave => {
    const spread = (order * width) / (2 * radius);
    const leg = perAmpere * (Math.sin(spread) / spread) * Math.sin(order * halfSpan);
    const [along, against] = [1, -1].map((way): Complex => {
      let [re, im] = [0, 0];
      lags.forEach((lag, a) => {
        const { re: x, im: y } = coilSum(places, poles, a + 1, order / polePairs, 0);
        // S exp(way j lag), S = x - j y
        re += x * Math.cos(lag) + way * y * Math.sin(lag);
        im += way * x * Math.sin(lag) - y * Math.cos(lag);
      });
      return { re: -leg * im, im: leg * re }; // times i
    });
    return { order, along, against };
  };
  const distance = (gap - winding.thickness) / 2;
  // B beside a layer of current goes as exp(-k distance)/k.
  const reach = ({ order, along, against }: ArmatureWave): number =>
    ((Math.hypot(along.re, along.im) + Math.hypot(against.re, against.im)) * Math.exp((-order / radius) * distance)) /
    order;
  const highest = REACH * Math.max(poles, 2 * winding.coils);
  const waves = Array.from({ length: highest }, (_, i) => waveOf(i + 1));
  const least = NEGLIGIBLE * Math.max(...waves.map(reach));
  return {
    waves: waves.filter((wave) => reach(wave) > least),
    polePairs,
    start: phaseAxis(places, poles, 1) / polePairs,
    period: polePairs / commonDivisor(winding.coils, polePairs),
  };
}

const commonDivisor = (a: number, b: number): number => (b === 0 ? a : commonDivisor(b, a % b));

/** Steps of the rotor over one pole pair. */
const STEPS = 36;

/**
 * The waves as the rotor sees them, exp(i order s) times these with s from the magnet's axis on, while it turns through all
 * positions before the winding: by position, then re and im of each wave, A/m^2.
 */
export function wavesOnRotor(armature: ArmatureWaves, current: RotorCurrent): readonly (readonly Complex[])[] {
  const { waves, polePairs, start, period } = armature;
  const z = { re: -current.direct, im: -current.quadrature };
  return Array.from({ length: STEPS * period }, (_, step) => {
    const theta = (2 * Math.PI * step) / STEPS;
    const turned = multiply(z, unit(theta));
    const conjugate = { re: turned.re, im: -turned.im };
    return waves.map(({ order, along, against }) => {
      const one = multiply(conjugate, along);
      const other = multiply(turned, against);
      return multiply({ re: one.re + other.re, im: one.im + other.im }, unit(order * (theta / polePairs + start)));
    });
  });
}

const unit = (angle: number): Complex => ({ re: Math.cos(angle), im: Math.sin(angle) });

const multiply = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});
