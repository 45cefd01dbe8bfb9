import fc from 'fast-check';

/** Marks of YAML, and what a reader may trip over. */
export const SCRAPS = [
  ...['', ' ', '\n', '\t', ':', '-', '- ', '#', '[', ']', '{', '}', ',', '"', "'", '|', '>', '?', '%', '~', '---\n'],
  ...['&a ', '*a', '!!float ', '!x ', '<<: *a', '&r0 ', '*r0', '%YAML 1.1\n', '...\n', '\\', '\r', '\r\n', '\u0000'],
  ...['\u001b[31m', '\u2028', '\ufeff', '\ud800', '__proto__: {a: 1}', 'constructor', '<b>&amp;</b>', '0', '1e999'],
];

/** Up to four scraps, or a few random characters each, in place of something or nothing anywhere in a text. */
export function scrapped(text: string, more: readonly string[]): fc.Arbitrary<string> {
  const cut = fc.record({
    at: fc.nat(text.length),
    length: fc.oneof(fc.constant(0), fc.nat(12), fc.nat(300)),
    scrap: fc.oneof(fc.constantFrom(...SCRAPS, ...more), fc.string({ unit: 'binary', maxLength: 6 })),
  });
  return fc
    .array(cut, { minLength: 1, maxLength: 4 })
    .map((cuts) =>
      cuts.reduce((whole, { at, length, scrap }) => whole.slice(0, at) + scrap + whole.slice(at + length), text),
    );
}
