// Control characters, marks that turn the writing direction, separators that break lines: whatever could make a
// terminal show something else than what stands in the text, or a line start where none is.
// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for
const unsafe = /[\u0000-\u001f\u007f-\u009f\u061c\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff]|\p{Surrogate}/gu;

/** `text` on one line with everything a terminal would act upon written out, for example `\x1b`. */
export function plainText(text: string): string {
  return text.replace(unsafe, (character) => {
    if (character === '\n' || character === '\t' || character === '\r') return ' ';
    const code = character.charCodeAt(0).toString(16);
    return code.length <= 2 ? `\\x${code.padStart(2, '0')}` : `\\u${code.padStart(4, '0')}`;
  });
}

/** As `plainText`, line by line. */
export const plainLines = (text: string): string => text.split('\n').map(plainText).join('\n');

/** `text` cut to at most `width` characters, the last one then an ellipsis. */
export function cutText(text: string, width: number): string {
  const characters = [...text];
  return characters.length <= width ? text : `${characters.slice(0, width - 1).join('')}…`;
}

/** Breaks `text` at spaces into lines of at most `width` characters; a longer word is cut. */
export function wrapText(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ').flatMap((whole) => whole.match(new RegExp(`.{1,${width}}`, 'gu')) ?? [''])) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else {
      line = line === '' ? word : `${line} ${word}`;
    }
  }
  return [...lines, line];
}
