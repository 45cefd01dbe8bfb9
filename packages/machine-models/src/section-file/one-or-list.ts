import type { Reader } from '../input/readers.js';

/** One value, or a list of them. */
export function oneOrList<T>(one: Reader<T>, many: Reader<readonly T[]>): Reader<T | readonly T[]> {
  return (value) => (Array.isArray(value) ? many(value) : one(value));
}
