import type { Fault, Place } from '@gapwright/fem-core';
import { showText } from '@gapwright/fem-core/text';

/** A row of a B-H table or a demagnetisation curve and where it stands in its file. */
export interface BhRow {
  readonly row: readonly [H: number, B: number];
  readonly at: Place;
}

const MOST_ROWS = 10_000;

/**
 * Rows `H, B` in A/m and T of a text with two columns, split at a comma, a semicolon, a tab or spaces. Lines that start
 * with # and empty ones are passed over, and so is one header: a first row without any number in it.
 *
 * @param file     the name to tell in places
 * @param example  a row to tell where one is none
 */
export function readBhCsv(
  text: string,
  file: string,
  example = '200, 0.5',
): { readonly rows: readonly BhRow[]; readonly faults: readonly Fault[] } {
  const rows: BhRow[] = [];
  const faults: Fault[] = [];
  let headerMayCome = true;
  for (const [i, line] of text.split(/\r\n|\r|\n/).entries()) {
    const content = line.trim();
    if (content === '' || content.startsWith('#')) continue;
    const at = { file, line: i + 1, column: line.indexOf(content[0]) + 1 };
    const cells = content.split(/\s*[,;\t]\s*|\s+/);
    const numbers = cells.map((cell) => (/^[+-]?[\d.]/.test(cell) ? Number(cell) : Number.NaN));
    const isHeader = headerMayCome && numbers.every(Number.isNaN);
    headerMayCome = false;
    if (isHeader) continue;
    if (rows.length + faults.length >= MOST_ROWS) {
      faults.push(fault('too-long', at, `has more than ${MOST_ROWS} rows`, 'thin the table out'));
      break;
    }
    if (numbers.length !== 2 || !numbers.every(Number.isFinite)) {
      faults.push(
        fault(
          'bad-row',
          at,
          `is no row of two numbers: ${showText(content)}`,
          `give H in A/m and B in T, for example ${example}`,
        ),
      );
    } else {
      rows.push({ row: [numbers[0], numbers[1]], at });
    }
  }
  return { rows, faults };
}

function fault(code: string, at: Place, wrong: string, remedy: string): Fault {
  return { code, at, key: '', wrong, remedy };
}
