import { type Chart, type ChartSeries, shareOf, tickText } from './materials-chart.js';

/** A character holds two by four dots (Unicode's Braille patterns, U+2800 on): its bits by column and row. */
const DOTS = [
  [0x01, 0x02, 0x04, 0x40],
  [0x08, 0x10, 0x20, 0x80],
] as const;
const BLANK = 0x2800;
const HEIGHT = 20;
const LEAST_WIDTH = 40;
const MOST_WIDTH = 120;

/** How a series is told apart without colour: of so many dots, so many are set. */
interface Dash {
  readonly period: number;
  readonly set: number;
  readonly sample: string;
}

const DASHES: readonly Dash[] = [
  { period: 1, set: 1, sample: '⠒⠒⠒⠒' },
  { period: 2, set: 1, sample: '⠐⠐⠐⠐' },
  { period: 10, set: 6, sample: '⠒⠂⠒⠂' },
  { period: 5, set: 1, sample: '⠐ ⠐ ' },
];

const dashOf = ({ broken, hot }: ChartSeries): Dash => DASHES[(hot ? 2 : 0) + (broken ? 1 : 0)];

/**
 * A chart as lines of text, its curves in Braille dots.
 *
 * @param width  characters a line may have; kept between 40 and 120
 */
export function chartLines(chart: Chart, width: number): string[] {
  const labels = chart.y.ticks.map((tick) => tickText(chart.y, tick));
  const left = Math.max(...labels.map((label) => label.length)) + 3;
  const columns = Math.min(Math.max(width, LEAST_WIDTH), MOST_WIDTH) - left - 1;
  const cells = new Uint8Array(columns * HEIGHT);
  for (const series of chart.series) drawSeries(cells, columns, chart, series);
  const rowOf = (tick: number): number => Math.round((1 - shareOf(chart.y, tick)) * (4 * HEIGHT - 1)) >> 2;
  const label = new Map(chart.y.ticks.map((tick, k) => [rowOf(tick), labels[k]]));
  const lines = [`  ${chart.y.label}`];
  for (let row = 0; row < HEIGHT; row++) {
    const bits = Array.from(cells.subarray(row * columns, (row + 1) * columns));
    const dots = bits.map((set) => (set === 0 ? ' ' : String.fromCharCode(BLANK + set))).join('');
    const shown = label.get(row);
    lines.push(`  ${(shown ?? '').padStart(left - 3)}${shown === undefined ? '│' : '┤'}${dots}`);
  }
  lines.push(...xAxis(chart, left, columns));
  lines.push('', `  ${chart.series.map((series) => `${dashOf(series).sample} ${series.label}`).join('   ')}`);
  return lines.map((line) => line.trimEnd());
}

function drawSeries(cells: Uint8Array, columns: number, { x, y }: Chart, series: ChartSeries): void {
  const { period, set } = dashOf(series);
  const places = series.points.map(([h, b]) => [
    Math.round(shareOf(x, h) * (2 * columns - 1)),
    Math.round((1 - shareOf(y, b)) * (4 * HEIGHT - 1)),
  ]);
  let count = 0;
  for (let k = 1; k < places.length; k++) {
    const [[x0, y0], [x1, y1]] = [places[k - 1], places[k]];
    const steps = Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0));
    for (let step = k === 1 ? 0 : 1; step <= steps; step++) {
      const share = steps === 0 ? 0 : step / steps;
      const column = Math.round(x0 + share * (x1 - x0));
      const row = Math.round(y0 + share * (y1 - y0));
      if (count++ % period < set) cells[(row >> 2) * columns + (column >> 1)] |= DOTS[column & 1][row & 3];
    }
  }
}

/** The line, its ticks' values as far as they do not run into each other, and what they measure. */
function xAxis({ x }: Chart, left: number, columns: number): string[] {
  const rule = Array<string>(columns).fill('─');
  const values = Array<string>(columns + 2).fill(' ');
  let free = 0;
  for (const tick of x.ticks) {
    const column = Math.round(shareOf(x, tick) * (2 * columns - 1)) >> 1;
    rule[column] = '┴';
    const text = tickText(x, tick);
    const from = Math.max(0, Math.min(column - (text.length >> 1), values.length - text.length));
    if (from < free) continue;
    [...text].forEach((letter, k) => {
      values[from + k] = letter;
    });
    free = from + text.length + 1;
  }
  const indent = ' '.repeat(left - 1);
  return [`${indent}└${rule.join('')}`, `${indent} ${values.join('')}`, `${indent} ${x.label.padStart(columns)}`];
}
