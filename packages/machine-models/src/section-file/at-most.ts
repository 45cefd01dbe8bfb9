import * as z from 'zod';

/** A list of groups, no longer than a bound that keeps the work on any file small. */
export function atMost<S extends z.ZodType>(schema: S, most: number) {
  return z.array(schema).max(most, { error: `has more than the ${most} entries that are read` });
}
