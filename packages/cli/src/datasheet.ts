import pc from 'picocolors';
import { cutText, wrapText } from './plain-text.js';
import type { Sheet, SheetBlock, SheetGroup, SheetRow, SheetTable } from './sheet-parts.js';

const width = 100;
const labelWidth = 24;

type Colours = ReturnType<typeof pc.createColors>;

/** The datasheet as lines of at most 100 characters; colours only mark headings, warnings and cautions. */
export function sheetText(sheet: Sheet, colour: boolean): string {
  const colours = pc.createColors(colour);
  const title = cutText(sheet.title, width);
  const lines = [
    colours.bold(title),
    '='.repeat(Math.min(width, Math.max(8, [...title].length))),
    ...sheet.groups.flatMap((group) => ['', ...groupLines(group, colours)]),
    ...remarks('Taken for granted', sheet.notes ?? [], colours.dim, colours),
    ...remarks('Warnings', sheet.warnings, colours.yellow, colours),
    ...remarks('Cautions', sheet.cautions, colours.red, colours),
  ];
  return `${lines.join('\n')}\n`;
}

function groupLines({ heading, blocks }: SheetGroup, colours: Colours): string[] {
  return [
    colours.bold(heading),
    ...blocks.flatMap((block, k) => [...(k > 0 ? [''] : []), ...blockLines(block, colours)]),
  ];
}

function blockLines(block: SheetBlock, colours: Colours): string[] {
  if (block.kind === 'table') return tableLines(block, colours);
  const column = noteColumn(block.rows);
  return block.rows.flatMap((row) => rowLines(row, column, colours));
}

/** Notes of a block stand in one column, as far right as its values need. */
function noteColumn(rows: readonly SheetRow[]): number {
  const widths = rows.filter((row) => row.note !== undefined).map((row) => row.value.length);
  return Math.min(Math.max(0, ...widths), width - labelWidth - 30);
}

function rowLines({ label, value, note }: SheetRow, column: number, colours: Colours): string[] {
  const room = width - labelWidth - 2;
  const [first, ...more] = wrapText(value, room);
  const text = `  ${label.padEnd(labelWidth)}${note === undefined ? first : first.padEnd(column)}`;
  return [
    note === undefined ? text : `${text}  ${colours.dim(note)}`,
    ...more.map((line) => ' '.repeat(labelWidth + 2) + line),
  ];
}

function tableLines({ columns, rows, caption }: SheetTable, colours: Colours): string[] {
  const widths = columns.map(({ name, unit }, c) =>
    Math.max(...wrapHead(name).map((word) => word.length), unit.length, ...rows.map((row) => row[c].length)),
  );
  const line = (cells: readonly string[]) =>
    `  ${cells.map((cell, c) => cell.padStart(widths[c])).join('  ')}`.trimEnd();
  const heads = columns.map(({ name }) => wrapHead(name));
  const height = Math.max(...heads.map((head) => head.length));
  const headLines = Array.from({ length: height }, (_, k) =>
    line(heads.map((head) => head[k - height + head.length] ?? '')),
  );
  return [
    ...headLines,
    colours.dim(line(columns.map(({ unit }) => unit))),
    ...rows.map(line),
    ...(caption === undefined ? [] : wrapText(caption, width - 2).map((text) => `  ${colours.dim(text)}`)),
  ];
}

/** A head of two words stands on two lines. */
const wrapHead = (name: string): string[] => name.split(' ');

function remarks(
  heading: string,
  texts: readonly string[],
  mark: (text: string) => string,
  colours: Colours,
): string[] {
  if (texts.length === 0) return [];
  const lines = texts.flatMap((text) => {
    const [first, ...more] = wrapText(text, width - 4);
    return [`  ${mark('-')} ${first}`, ...more.map((line) => `    ${line}`)];
  });
  return ['', mark(colours.bold(heading)), ...lines];
}
