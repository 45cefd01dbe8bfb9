import type { FieldValue } from '../field/values.js';
import type { Answer } from '../probes/probe.js';
import type { SectionAnswer } from '../probes/solve-probes.js';

/** A figure read off an answer, with the solver's bound of its error in the same unit. */
export type Reading = (answer: SectionAnswer) => { readonly value: number; readonly error: number };

type AnswerOf<K extends Answer['kind']> = Extract<Answer, { kind: K }>;

function find<K extends Answer['kind']>(answer: SectionAnswer, kind: K, name: string): AnswerOf<K> {
  const found = answer.answers.find((one): one is AnswerOf<K> => one.kind === kind && one.name === name);
  if (found === undefined) throw new Error(`no ${kind} probe ${name}`);
  return found;
}

/** Quantities of the field at a point: A in Wb/m, B in T. */
export type PointQuantity = 'a' | 'bx' | 'by';

export const pointOf =
  (name: string, quantity: PointQuantity): Reading =>
  (answer) => {
    const { value, error } = find(answer, 'point', name);
    return { value: value?.[quantity] ?? Number.NaN, error: quantity === 'a' ? error.a : error.b };
  };

/** |B| at a point, T. */
export const magnitudeAt =
  (name: string): Reading =>
  (answer) => {
    const { value, error } = find(answer, 'point', name);
    return { value: value === undefined ? Number.NaN : Math.hypot(value.bx, value.by), error: error.b };
  };

export const meanOf =
  (name: string, quantity: 'bx' | 'by' | 'b'): Reading =>
  (answer) => {
    const mean = find(answer, 'mean', name);
    return { value: mean[quantity], error: mean.error };
  };

export const forceOf =
  (name: string, quantity: 'fx' | 'fy' | 'torque'): Reading =>
  (answer) => {
    const force = find(answer, 'force', name);
    return { value: force[quantity], error: quantity === 'torque' ? force.error.torque : force.error.force };
  };

export const linkageOf =
  (name: string): Reading =>
  (answer) => {
    const { linkage, error } = find(answer, 'linkage', name);
    return { value: linkage, error };
  };

export const fluxOf =
  (name: string): Reading =>
  (answer) => {
    const { flux, error } = find(answer, 'flux', name);
    return { value: flux, error };
  };

/** Energy of the whole section, J/m. */
export const energyOf: Reading = ({ energy, energyError }) => ({ value: energy, error: energyError });

/** A multiple of a reading. */
export const scaled =
  (reading: Reading, factor: number): Reading =>
  (answer) => {
    const { value, error } = reading(answer);
    return { value: factor * value, error: Math.abs(factor) * error };
  };

/** The sum of readings. */
export const summed =
  (...readings: readonly Reading[]): Reading =>
  (answer) => {
    const all = readings.map((read) => read(answer));
    return {
      value: all.reduce((sum, { value }) => sum + value, 0),
      error: all.reduce((sum, { error }) => sum + error, 0),
    };
  };

/**
 * (2/L) integral of By cos(k s) over a line of length L along +x, s from its start, read off A by parts, since A is by an
 * order the better known: By = -dA/ds. The trapezium rule is exact but for harmonics of the order of the number of points
 * where the wave goes on beyond the line's ends as on it.
 */
export const cosineOf = (name: string, k: number): Reading =>
  waveOf(
    name,
    (s) => -k * Math.sin(k * s),
    (s) => -Math.cos(k * s),
  );

/** The same with sin(k s). */
export const sineOf = (name: string, k: number): Reading =>
  waveOf(
    name,
    (s) => k * Math.cos(k * s),
    (s) => -Math.sin(k * s),
  );

/** (2/L) (integral of A inner ds + A outer at the end - A outer at the start). */
const waveOf =
  (name: string, inner: (s: number) => number, outer: (s: number) => number): Reading =>
  (answer) => {
    const { distance, values, errors } = find(answer, 'line', name);
    const last = values.length - 1;
    const length = distance[last];
    let [value, error] = [0, 0];
    values.forEach((at: FieldValue | undefined, i) => {
      const end = i === 0 ? -1 : i === last ? 1 : 0;
      const weight = (inner(distance[i]) * (end === 0 ? 2 : 1)) / last + (2 * end * outer(distance[i])) / length;
      value += weight * (at?.a ?? Number.NaN);
      error += Math.abs(weight) * errors[i].a;
    });
    return { value, error };
  };

/** Amplitude of a wave from its two parts. */
export const amplitudeOf =
  (cosine: Reading, sine: Reading): Reading =>
  (answer) => {
    const [c, s] = [cosine(answer), sine(answer)];
    return { value: Math.hypot(c.value, s.value), error: Math.hypot(c.error, s.error) };
  };
