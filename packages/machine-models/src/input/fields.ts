import * as z from 'zod';
import type { Problem } from './problem.js';
import type { Reader } from './readers.js';

/** A key read by one of our readers; what the reader tells travels in the issue's `params`. */
export function field<T>(read: Reader<T>): z.ZodType<T> {
  return z.unknown().transform((value, context): T => {
    const reading = read(value);
    if ('value' in reading) return reading.value;
    for (const found of reading.problems) {
      context.addIssue({ code: 'custom', message: found.wrong, path: [...found.path], params: { problem: found } });
    }
    return z.NEVER;
  });
}

/** A key that may be left out. */
export function optional<T>(read: Reader<T>) {
  return field(read).optional();
}

/** A key that has a value of its own where the file is silent. */
export function usually<T>(value: T, read: Reader<T>) {
  return field(read).default(value as z.core.util.NoUndefined<T>); // readers never give undefined
}

/** A group of keys and no others. The message about unknown keys holds the known ones, for `readSchema` to choose from. */
export function group<S extends z.core.$ZodLooseShape>(shape: S) {
  return z.strictObject(shape, {
    error: (issue) => (issue.code === 'unrecognized_keys' ? Object.keys(shape).join(' ') : undefined),
  });
}

/** A group whose further keys depend on one of them, which is `usual` where it is left out. */
export function variants<
  K extends string,
  G extends readonly [z.core.$ZodTypeDiscriminable, ...z.core.$ZodTypeDiscriminable[]],
>(key: K, groups: G, usual?: string) {
  return z.preprocess(
    (value) => (usual !== undefined && isGroup(value) && !(key in value) ? { ...value, [key]: usual } : value),
    z.discriminatedUnion(key, groups),
  );
}

function isGroup(value: unknown): value is object {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** The problem a `field` put into an issue. */
export function problemOf(issue: z.core.$ZodIssue): Problem | undefined {
  return issue.code === 'custom' ? (issue.params?.problem as Problem | undefined) : undefined; // put there by `field` alone
}
