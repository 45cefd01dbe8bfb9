import { MU0 } from '@gapwright/fem-core';
import { demagnetisationAt, kneeAt, type LibraryMaterial, type Magnet, sampleCurve } from '@gapwright/machine-models';
import { given } from './figures.js';

type Point = readonly [x: number, y: number];

export interface ChartAxis {
  readonly label: string;
  readonly log: boolean;
  readonly from: number;
  readonly to: number;
  readonly ticks: readonly number[];
  /** Lines of the grid between the ticks. */
  readonly between: readonly number[];
}

export interface ChartSeries {
  readonly label: string;
  readonly points: readonly Point[];
  /** The normal curve B is drawn in full, the polarisation J broken; 20 degC and the other temperature in two colours. */
  readonly broken: boolean;
  readonly hot: boolean;
}

/** A magnetisation curve ready to be drawn, whatever on. */
export interface Chart {
  readonly x: ChartAxis;
  readonly y: ChartAxis;
  readonly series: readonly ChartSeries[];
  /** Rows of the table, or knees. */
  readonly marks: readonly Point[];
  readonly marksLabel: string;
  /** Straight lines to read working points by, each with its name at the far end. */
  readonly guidesLabel: string;
  readonly guides: readonly { readonly label: string; readonly from: Point; readonly to: Point }[];
}

/** What there is to draw of a material, magnets at the temperatures in degC; undefined for those without a curve. */
export function materialChart(material: LibraryMaterial, temperatures: readonly number[]): Chart | undefined {
  if (material.kind === 'steel-curve') return steelChart(material.bh);
  return material.kind === 'magnet' ? magnetChart(material, temperatures) : undefined;
}

/** More decades than that hide the knee of any steel. */
const MOST_DECADES = 7;

/** B over the logarithm of H. */
function steelChart(bh: readonly Point[]): Chart {
  const rows = bh.filter(([h]) => h > 0);
  const [lastField, lastFlux] = rows[rows.length - 1];
  const to = Math.ceil(Math.log10(lastField) - 1e-9);
  const from = Math.max(Math.min(Math.floor(Math.log10(rows[0][0]) + 1e-9), to - 1), to - MOST_DECADES);
  const decades = Array.from({ length: to - from + 1 }, (_, k) => from + k);
  const inside = ([h]: Point): boolean => h >= 10 ** from;
  return {
    x: {
      label: 'H in A/m',
      log: true,
      from: 10 ** from,
      to: 10 ** to,
      ticks: decades.map((power) => 10 ** power),
      between: decades.slice(0, -1).flatMap((power) => [2, 3, 4, 5, 6, 7, 8, 9].map((factor) => factor * 10 ** power)),
    },
    y: { label: 'B in T', ...fluxAxis(lastFlux) },
    series: [{ label: 'B', points: sampleCurve(bh, 400).filter(inside), broken: false, hot: false }],
    marks: rows.filter(inside),
    marksLabel: 'rows of the table',
    guidesLabel: '',
    guides: [],
  };
}

/** Permeance coefficients -B / (mu0 H) of the guides. */
const PERMEANCES = [0.5, 1, 2, 4];

/** T and kA/m: what is smaller shows nothing. */
const LEAST = 1e-3;

/** The second quadrant: normal curve B and polarisation J over H in kA/m; undefined where there is nothing to see. */
function magnetChart(magnet: Magnet, temperatures: readonly number[]): Chart | undefined {
  const curves = temperatures.map((celsius) => ({ celsius, ...branches(magnet, celsius) }));
  const deepest = Math.min(...curves.flatMap(({ j, b }) => [...j, ...b].map(([h]) => h)));
  const highest = Math.max(...curves.flatMap(({ j }) => j.map(([, y]) => y)));
  if (-deepest < LEAST || highest < LEAST) return undefined;
  const step = niceStep((-1.04 * deepest) / 8);
  const count = Math.ceil((-1.04 * deepest) / step);
  const y = fluxAxis(highest);
  return {
    x: {
      label: 'H in kA/m',
      log: false,
      from: -count * step,
      to: 0,
      ticks: Array.from({ length: count + 1 }, (_, k) => round((k - count) * step)),
      between: [],
    },
    y: { label: 'B and J in T', ...y },
    series: curves.flatMap(({ celsius, b, j }, k) => [
      { label: `B at ${given(celsius)} degC`, points: b, broken: false, hot: k > 0 },
      { label: `J at ${given(celsius)} degC`, points: j, broken: true, hot: k > 0 },
    ]),
    marks: temperatures.flatMap((celsius) => {
      const knee = kneeAt(magnet, celsius);
      if (knee === undefined) return [];
      const polarisation: Point = [knee.h / 1000, knee.b - MU0 * knee.h];
      return knee.b > 0 ? [polarisation, [knee.h / 1000, knee.b] as const] : [polarisation];
    }),
    marksLabel: 'knee',
    guidesLabel: 'permeance coefficient -B / (\u03bc\u2080H), as the magnetic circuit sets it',
    guides: PERMEANCES.map((permeance) => {
      const slope = -permeance * MU0 * 1000; // T per kA/m
      const h = Math.max(-count * step, y.to / slope);
      return { label: given(permeance), from: [0, 0], to: [h, slope * h] };
    }),
  };
}

/** Both branches down to 0; H in kA/m. A loop of square corners falls there at once. */
function branches(magnet: Magnet, celsius: number): { readonly b: readonly Point[]; readonly j: readonly Point[] } {
  const rows = demagnetisationAt(magnet, celsius);
  const b = rows.map(([h, y]): Point => [h / 1000, y]);
  const j = rows.map(([h, y]): Point => [h / 1000, y - MU0 * h]);
  if (kneeAt(magnet, celsius) === undefined || magnet.demagnetisation !== undefined) {
    return { b: downToZero(b), j: downToZero(j) };
  }
  const foot: Point = [b[b.length - 1][0], 0];
  return { b: downToZero(b[b.length - 1][1] > 0 ? [...b, foot] : b), j: [...j, foot] };
}

/** The line as far as y is not negative. */
function downToZero(points: readonly Point[]): readonly Point[] {
  const below = points.findIndex(([, y]) => y < 0);
  if (below < 0) return points;
  const [[x1, y1], [x2, y2]] = [points[below - 1], points[below]];
  return [...points.slice(0, below), [x1 + ((x2 - x1) * y1) / (y1 - y2), 0]];
}

function fluxAxis(highest: number): Omit<ChartAxis, 'label'> {
  const step = niceStep((1.04 * highest) / 8);
  const count = Math.ceil((1.04 * highest) / step);
  const ticks = Array.from({ length: count + 1 }, (_, k) => round(k * step));
  return { log: false, from: 0, to: ticks[count], ticks, between: [] };
}

/** The least of 1, 2, 5, 10, ... times a power of ten that is `least` or more (`least` > 0). */
function niceStep(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least));
  return power * ([1, 2, 5].find((factor) => factor * power >= least * (1 - 1e-9)) ?? 10);
}

/** Takes the last bits off a multiple of a decimal step. */
const round = (value: number): number => Number(value.toPrecision(12)) + 0; // no -0

/** Where a value stands on its axis: 0 at its beginning, 1 at its end. */
export function shareOf({ log, from, to }: ChartAxis, value: number): number {
  return log ? Math.log(value / from) / Math.log(to / from) : (value - from) / (to - from);
}

/** A tick's value as text: `100`, `1k`, `0.5`. */
export function tickText({ log, ticks }: ChartAxis, value: number): string {
  if (log) return value >= 1e6 ? `${given(value / 1e6)}M` : value >= 1000 ? `${given(value / 1000)}k` : given(value);
  const decimals = Math.max(...ticks.map((tick) => (String(tick).split('.')[1] ?? '').length));
  return value.toFixed(decimals);
}
