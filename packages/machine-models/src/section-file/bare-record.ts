/** A record without a prototype: names out of a file mean no more than themselves in it, `constructor` too. */
export function bareRecord<T>(entries: Iterable<readonly [string, T]>): Readonly<Record<string, T>> {
  const record: Record<string, T> = Object.create(null);
  for (const [name, value] of entries) record[name] = value;
  return record;
}
