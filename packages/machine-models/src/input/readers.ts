import {
  type Dimension,
  findNearest,
  listWords,
  type Misreading,
  parseAnyQuantity,
  parsePrice,
  parseQuantity,
  showValue,
} from '@gapwright/fem-core/text';
import { type Problem, problem } from './problem.js';

/**
 * Stands in the input for a value that was found wrong and has been told already. Readers make NaN of it (or an empty
 * text, an empty list, the first choice): comparisons with NaN are false, so the checks that do not depend on the value
 * still speak, and the others keep silent.
 */
export const UNREADABLE: unique symbol = Symbol('unreadable');

/** Turns a plain value of the file into one of ours, or tells everything wrong with it. */
export type Reader<T> = (value: unknown) => { readonly value: T } | { readonly problems: readonly Problem[] };

/** Bounds as texts, for they are told as written: `{ above: '0 mm', to: '100 m' }`. */
export interface Bounds {
  readonly above?: string;
  readonly from?: string;
  readonly below?: string;
  readonly to?: string;
}

/** @param say  what to give, for example 'the size along the shaft, for example 10 mm' */
function reader<T>(say: string, standIn: T, read: (value: unknown) => ReturnType<Reader<T>>): Reader<T> {
  return (value) => {
    if (value === UNREADABLE) return { value: standIn };
    if (value === undefined) return refuse('missing', 'is missing', `give ${say}`);
    if (value === null) return refuse('missing', 'is empty', `give ${say}`);
    return read(value);
  };
}

function refuse(code: string, wrong: string, remedy: string): { readonly problems: readonly Problem[] } {
  return { problems: [problem(code, wrong, remedy)] };
}

/** A number with a unit of its dimension, in the base unit of `parseQuantity`. */
export function quantity(dimension: Dimension, bounds: Bounds, say: string): Reader<number> {
  const check = checkBounds(dimension, bounds);
  return reader(say, Number.NaN, (value) => {
    const reading = readNumber(value, say, (text) => parseQuantity(text, dimension));
    if ('problems' in reading) return reading;
    const wrong = check(reading.value);
    return wrong === undefined
      ? { value: reading.value }
      : refuse('out-of-range', `${wrong}, got ${showValue(value)}`, `give ${say}`);
  });
}

/** A whole number without a unit, both bounds included. */
export function whole(from: number, to: number, say: string): Reader<number> {
  const number = quantity('ratio', { from: String(from), to: String(to) }, say);
  return (value) => {
    const reading = number(value);
    if ('problems' in reading || value === UNREADABLE || Number.isInteger(reading.value)) return reading;
    return refuse('not-whole', `must be a whole number, got ${showValue(value)}`, `give ${say}`);
  };
}

/** A number with any known unit, or a share: how far something may be off. */
export function anyQuantity(say: string): Reader<{ readonly value: number; readonly dimension: Dimension }> {
  return reader<{ readonly value: number; readonly dimension: Dimension }>(
    say,
    { value: Number.NaN, dimension: 'ratio' },
    (value) => {
      const reading = readNumber(value, say, parseAnyQuantity);
      return 'problems' in reading ? reading : { value: reading };
    },
  );
}

export function price(say: string): Reader<{ readonly perKilogram: number; readonly currency: string }> {
  return reader(say, { perKilogram: Number.NaN, currency: '' }, (value) => {
    const reading = readNumber(value, say, parsePrice);
    if ('problems' in reading || reading.perKilogram >= 0) return 'problems' in reading ? reading : { value: reading };
    return refuse('out-of-range', `must be at least 0, got ${showValue(value)}`, `give ${say}`);
  });
}

/** One of some words. */
export function choice<const W extends readonly [string, ...string[]]>(words: W): Reader<W[number]> {
  return reader<W[number]>(listWords(words), words[0], (value) => {
    if (words.some((word) => word === value)) return { value: value as W[number] }; // just found among them
    return { problems: [badChoice(words, value)] };
  });
}

export function badChoice(words: readonly string[], value: unknown): Problem {
  const nearest = typeof value === 'string' ? findNearest(value, words) : undefined;
  const wrong = `must be ${listWords(words)}, got ${showValue(value)}`;
  return problem('bad-choice', wrong, nearest === undefined ? `give ${listWords(words)}` : `did you mean ${nearest}?`);
}

/** A line of text: at most 200 characters, none of them a control character. */
export function text(say: string): Reader<string> {
  return reader(say, '', (value) => {
    if (typeof value !== 'string') {
      return refuse('not-text', `must be text, got ${showValue(value)}`, `give ${say}; numbers go in quotes`);
    }
    if (value.length > 0 && value.length <= 200 && !/[\p{Cc}\p{Zl}\p{Zp}]/u.test(value)) return { value };
    return refuse('not-text', `must be one line of 1 to 200 characters, got ${showValue(value)}`, `give ${say}`);
  });
}

/** A word that has a meaning of its own, or what the other reader reads. */
export function orWord<const W extends string, T>(word: W, read: Reader<T>): Reader<W | T> {
  return (value) => {
    if (value === word) return { value: word };
    const reading = read(value);
    if (!('problems' in reading) || typeof value !== 'string') return reading;
    return { problems: reading.problems.map((found) => ({ ...found, remedy: `${found.remedy}; or ${word}` })) };
  };
}

/** A list of values alike; tells what is wrong with each of them. */
export function list<T>(read: Reader<T>, least: number, most: number, say: string): Reader<readonly T[]> {
  return reader<readonly T[]>(say, [], (value) => {
    if (!Array.isArray(value)) return refuse('not-a-list', `must be a list, got ${showValue(value)}`, `give ${say}`);
    if (value.length < least || value.length > most) {
      const wanted = least === most ? `${least}` : `${least} to ${most}`;
      return refuse('wrong-count', `must have ${wanted} entries, has ${value.length}`, `give ${say}`);
    }
    const readings = value.map((item) => read(item));
    const problems = readings.flatMap((reading, i) =>
      'problems' in reading ? reading.problems.map((found) => ({ ...found, path: [i, ...found.path] })) : [],
    );
    if (problems.length > 0) return { problems };
    return { value: readings.flatMap((reading) => ('value' in reading ? [reading.value] : [])) };
  });
}

/** A list of two numbers, each with a meaning of its own. */
export function pair(first: Reader<number>, second: Reader<number>, say: string): Reader<readonly [number, number]> {
  return reader<readonly [number, number]>(say, [Number.NaN, Number.NaN], (value) => {
    if (!Array.isArray(value) || value.length !== 2) {
      const found = Array.isArray(value) ? `a list of ${value.length}` : showValue(value);
      return refuse('not-a-pair', `must be a pair, got ${found}`, `give ${say}`);
    }
    const [a, b] = [first(value[0]), second(value[1])];
    if ('value' in a && 'value' in b) return { value: [a.value, b.value] };
    const problems = [a, b].flatMap((reading, i) =>
      'problems' in reading ? reading.problems.map((found) => ({ ...found, path: [i, ...found.path] })) : [],
    );
    return { problems };
  });
}

function readNumber<T extends object>(
  value: unknown,
  say: string,
  parse: (text: string | number) => T | Misreading,
): T | { readonly problems: readonly Problem[] } {
  if (typeof value !== 'string' && typeof value !== 'number') {
    return refuse('not-a-number', `must be a number, got ${showValue(value)}`, `give ${say}`);
  }
  const reading = parse(value);
  if (!('wrong' in reading)) return reading;
  return refuse('bad-quantity', reading.wrong, `${reading.remedy} (${say})`);
}

/** What is wrong with a value against the bounds, as 'must be more than 0 mm'; undefined where nothing is. */
function checkBounds(dimension: Dimension, bounds: Bounds): (value: number) => string | undefined {
  const limit = (text: string): number => {
    const reading = parseQuantity(text, dimension);
    if ('wrong' in reading) throw new Error(`bound ${text}: ${reading.wrong}`);
    return reading.value;
  };
  const { above, from, below, to } = bounds;
  const low = above === undefined ? Number.NEGATIVE_INFINITY : limit(above);
  const least = from === undefined ? Number.NEGATIVE_INFINITY : limit(from);
  const high = below === undefined ? Number.POSITIVE_INFINITY : limit(below);
  const most = to === undefined ? Number.POSITIVE_INFINITY : limit(to);
  return (value) => {
    if (value <= low) return `must be more than ${above}`;
    if (value < least) return `must be at least ${from}`;
    if (value >= high) return `must be less than ${below}`;
    return value > most ? `must be at most ${to}` : undefined;
  };
}
