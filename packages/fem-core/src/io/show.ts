/**
 * A stranger's text made fit for a message on one line: control characters, line breaks and marks that reorder what is
 * read are escaped, and what is longer than `longest` characters is cut.
 */
export function showText(text: string, longest = 60): string {
  const head = text.length > longest ? `${text.slice(0, longest)}...` : text;
  return head.replace(/[\p{C}\p{Zl}\p{Zp}]/gu, (mark) => `\\u{${mark.codePointAt(0)?.toString(16)}}`);
}

/** What was found where something else was wanted: texts and numbers as they stand, anything else by its kind. */
export function showValue(value: unknown): string {
  if (value === undefined || value === null) return 'nothing';
  if (typeof value === 'string') return value === '' ? 'an empty text' : showText(value);
  if (Array.isArray(value)) return 'a list';
  if (typeof value === 'object') return 'a group of keys';
  if (typeof value === 'number' && !Number.isFinite(value)) return nonFiniteText(value);
  return String(value);
}

/** As YAML writes it. */
function nonFiniteText(value: number): string {
  if (Number.isNaN(value)) return '.nan';
  return value < 0 ? '-.inf' : '.inf';
}

/** The words as one phrase: 'm, mm or in'. */
export function listWords(words: readonly string[]): string {
  return words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} or ${words[words.length - 1]}`;
}
