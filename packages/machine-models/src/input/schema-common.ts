import { usually } from './fields.js';
import { quantity, type Reader } from './readers.js';

/** A length that may be nothing. */
export function length(say: string): Reader<number> {
  return quantity('length', { from: '0 mm', to: '100 m' }, say);
}

/** A length of something that is there. */
export function size(say: string): Reader<number> {
  return quantity('length', { above: '0 mm', from: '1 um', to: '100 m' }, say);
}

/** A temperature of some part, 20 degC where it is not given. */
export function temperature(say: string) {
  return usually(20, anyTemperature(say));
}

export function anyTemperature(say: string): Reader<number> {
  return quantity('temperature', { from: '-270 degC', to: '1000 degC' }, say);
}

/** A speed at which something happens. */
export function speed(say: string): Reader<number> {
  return quantity('rotation', { above: '0 rpm', to: '1e6 rpm' }, say);
}
