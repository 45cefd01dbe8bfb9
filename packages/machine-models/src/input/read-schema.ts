import { findNearest, listWords, type Path, showText, showValue } from '@gapwright/fem-core/text';
import type * as z from 'zod';
import { problemOf } from './fields.js';
import { type Problem, problem } from './problem.js';
import { badChoice, UNREADABLE } from './readers.js';

/**
 * Reads a plain value by a schema made of our fields.
 *
 * Where something is wrong, the value comes back all the same if its groups are there: what could not be read holds a
 * stand-in (see `UNREADABLE`), so that whoever judges how the values go together can do so for the rest.
 *
 * @param raw  a tree of our own, as `plainValue` makes it; stand-ins are written into it
 */
export function readSchema<S extends z.ZodType>(
  schema: S,
  raw: unknown,
): { readonly value: z.output<S> | undefined; readonly problems: readonly Problem[] } {
  const first = schema.safeParse(raw);
  if (first.success) return { value: first.data, problems: [] };
  const problems = first.error.issues.flatMap((issue) => problemsOf(issue, valueAt(raw, issue.path)));
  for (const { code, path } of problems) setAside(raw, path, code === 'unknown-key' || code === 'wrong-kind');
  const second = schema.safeParse(raw);
  return { value: second.success ? second.data : undefined, problems };
}

function problemsOf(issue: z.core.$ZodIssue, found: unknown): readonly Problem[] {
  const path = issue.path as Path; // no key of ours is a symbol
  switch (issue.code) {
    case 'unrecognized_keys':
      return issue.keys.map((key) => unknownKey([...path, key], key, issue.message.split(' ')));
    case 'invalid_union':
      return [{ ...badVariant('options' in issue ? (issue.options as readonly string[]) : [], found), path }];
    case 'invalid_type': {
      const [wanted, remedy] =
        issue.expected === 'array'
          ? ['a list', 'give a list']
          : ['a group of keys', 'give its keys below it, or in braces'];
      if (found === undefined) return [problem('missing', 'is missing', remedy, path)];
      return [problem('wrong-kind', `must be ${wanted}, got ${showValue(found)}`, remedy, path)];
    }
    default: {
      const told = problemOf(issue);
      return [told ? { ...told, path } : problem('invalid', showText(issue.message, 200), '', path)];
    }
  }
}

/** The key that decides which further keys there are. */
function badVariant(words: readonly string[], found: unknown): Problem {
  if (found === undefined) return problem('missing', 'is missing', `give ${listWords(words)}`);
  return badChoice(words, found);
}

function unknownKey(path: Path, key: string, known: readonly string[]): Problem {
  const nearest = findNearest(key, known);
  const remedy = nearest === undefined ? `known here: ${known.join(', ')}` : `did you mean ${nearest}?`;
  return problem('unknown-key', 'is not a known key', remedy, path);
}

function valueAt(raw: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>((value, step) => (value as Record<PropertyKey, unknown> | undefined)?.[step], raw);
}

/** Marks the value at the end of the way as unreadable, or takes away a key or group that should not be there. */
function setAside(raw: unknown, path: Path, takeAway: boolean): void {
  const parent = valueAt(raw, path.slice(0, -1));
  const key = path.at(-1);
  if (typeof parent !== 'object' || parent === null || key === undefined) return;
  if (takeAway) Reflect.deleteProperty(parent, key);
  else Reflect.set(parent, key, UNREADABLE);
}
