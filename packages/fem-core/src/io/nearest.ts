/** Longer words get no suggestion: nobody mistypes a word that long, and the work grows with the length. */
const LONGEST = 64;

/**
 * The known word that `word` was most likely meant to be, or undefined if none is near: at most one slip for every three
 * letters, and never all of them.
 */
export function findNearest(word: string, known: Iterable<string>): string | undefined {
  if (word.length > LONGEST) return undefined;
  let best: string | undefined;
  let most = Math.min(Math.max(1, Math.floor(word.length / 3)), word.length - 0.5);
  for (const candidate of known) {
    if (Math.abs(candidate.length - word.length) > most) continue; // so many slips at least
    const slips = editDistance(word, candidate);
    if (slips < most || (best === undefined && slips <= most)) [best, most] = [candidate, slips];
  }
  return best;
}

/**
 * Least number of slips that turn one word into the other: a letter left out, added or changed, or two neighbours
 * swapped, one slip each (optimal string alignment distance; F. Damerau, A technique for computer detection and
 * correction of spelling errors, 1964); a wrong case, half a slip.
 */
export function editDistance(from: string, to: string): number {
  let before: number[] = [];
  let above = Array.from({ length: to.length + 1 }, (_, j) => j);
  for (let i = 1; i <= from.length; i++) {
    const row = [i];
    for (let j = 1; j <= to.length; j++) {
      row[j] = Math.min(above[j] + 1, row[j - 1] + 1, above[j - 1] + letterDistance(from[i - 1], to[j - 1]));
      const swapped = i > 1 && j > 1 && from[i - 1] === to[j - 2] && from[i - 2] === to[j - 1];
      if (swapped) row[j] = Math.min(row[j], before[j - 2] + 1);
    }
    [before, above] = [above, row];
  }
  return above[to.length];
}

function letterDistance(a: string, b: string): number {
  if (a === b) return 0;
  return a.toLowerCase() === b.toLowerCase() ? 0.5 : 1;
}
