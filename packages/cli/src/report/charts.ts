import type { MachineResult } from '@gapwright/machine-models';
import * as Plot from '@observablehq/plot';
import { parseHTML } from 'linkedom/worker';
import { figure, given, mm } from '../figures.js';
import { tellingOrders } from '../sheet.js';

/** A drawn chart with what explains it. */
export interface Chart {
  readonly heading: string;
  readonly legend: readonly LegendEntry[];
  /** An SVG element; holds no text but numbers, units and our own words. */
  readonly svg: string;
  readonly caption: string;
}

export interface LegendEntry {
  readonly label: string;
  readonly colour: string;
  readonly dash: string;
}

/** The page defines these for light and dark; the order stays apart for colour-blind eyes, the dashes without colour. */
const seriesColours = [
  'var(--series-1)',
  'var(--series-2)',
  'var(--series-3)',
  'var(--series-4)',
  'var(--series-5)',
] as const;
const seriesDashes = ['none', '7 3', '2 3', '9 3 2 3', '12 4'] as const;

const size = { width: 940, height: 340, marginLeft: 62, marginRight: 24, marginTop: 34, marginBottom: 52 } as const;
const quarterTurns = [-90, 0, 90, 180, 270, 360];

interface Series {
  readonly label: string;
  readonly x: readonly number[];
  readonly y: readonly number[];
}

/** All charts of the report, in reading order. */
export function drawCharts(result: MachineResult): Chart[] {
  return [gapField(result), legField(result), voltages(result), voltageHarmonics(result)];
}

function gapField({ slices }: MachineResult): Chart {
  const angles = Array.from({ length: 361 }, (_, k) => k - 90);
  const series = slices.map(({ radius_m, mid_B }) => ({
    label: `radius ${mm(radius_m)} mm`,
    x: angles,
    y: angles.map((angle) => seriesAt(mid_B.order, mid_B.amplitude_T, angle)),
  }));
  return lineChart('Field in the gap along one pole pair', series, {
    x: 'electrical angle from a magnet\u2019s axis, deg',
    y: 'axial flux density on the mid-plane, T',
    caption: `Harmonics up to order ${Math.max(...slices.flatMap(({ mid_B }) => mid_B.order))} of the solved field; 180 deg are one pole pitch (${slices.map(({ pole_pitch_m }) => mm(pole_pitch_m)).join(', ')} mm).`,
  });
}

function seriesAt(orders: readonly number[], amplitudes: readonly number[], degrees: number): number {
  return orders.reduce((sum, n, k) => sum + amplitudes[k] * Math.cos((n * degrees * Math.PI) / 180), 0);
}

function legField({ slices }: MachineResult): Chart {
  const series = slices.map(({ radius_m, leg_B }) => ({
    label: `radius ${mm(radius_m)} mm`,
    ...wholePeriod(leg_B.electrical_deg, leg_B.value_T),
  }));
  const widths = slices.map(({ leg_width_m }) => mm(leg_width_m)).join(', ');
  return lineChart('Field that a leg of the winding sees', series, {
    x: 'electrical angle from a magnet\u2019s axis, deg',
    y: 'flux density averaged over the leg, T',
    caption: `Averaged over the winding thickness and the leg\u2019s width (${widths} mm).`,
  });
}

function voltages({ emf }: MachineResult): Chart {
  const { electrical_deg, phase_V, line_V, rectified_V } = emf.waveform;
  const series = [
    { label: 'phase', ...wholePeriod(electrical_deg, phase_V) },
    { label: 'line', ...wholePeriod(electrical_deg, line_V) },
    { label: 'rectified', ...wholePeriod(electrical_deg, rectified_V) },
  ];
  return lineChart(`EMF at ${given(emf.speed_rpm)} rpm`, series, {
    x: 'electrical angle, deg',
    y: 'EMF with no load, V',
    caption: `One electrical period is ${figure(1000 / emf.frequency_Hz, 3)} ms. Rectified: highest less lowest terminal, without diode drop.`,
  });
}

/** A waveform that stops short of 360 deg, ended there by its own beginning. */
function wholePeriod(x: readonly number[], y: readonly number[]): Pick<Series, 'x' | 'y'> {
  return x[0] === 0 && x[x.length - 1] < 360 ? { x: [...x, 360], y: [...y, y[0]] } : { x, y };
}

function lineChart(
  heading: string,
  series: readonly Series[],
  texts: { readonly x: string; readonly y: string; readonly caption: string },
): Chart {
  const marks = series.map(({ x, y }, k) =>
    Plot.lineY(y, { x, stroke: colourOf(k), strokeDasharray: dashOf(k), strokeWidth: 1.8, curve: 'linear' }),
  );
  const [from, to] = [Math.min(...series.flatMap(({ x }) => x)), Math.max(...series.flatMap(({ x }) => x))];
  const svg = draw({
    ariaLabel: `${heading}: ${texts.y} against ${texts.x}`,
    x: {
      label: texts.x,
      labelAnchor: 'center',
      labelArrow: 'none',
      ticks: quarterTurns.filter((t) => t >= from && t <= to),
    },
    y: { label: texts.y, labelArrow: 'none', grid: true, nice: true },
    marks: [Plot.ruleY([0], { strokeOpacity: 0.6 }), ...marks],
  });
  const legend = series.map(({ label }, k) => ({ label, colour: colourOf(k), dash: dashOf(k) }));
  return { heading, legend, svg, caption: texts.caption };
}

/** Bars of everything above the fundamental; the fundamentals, tens of times larger, stand in the caption. */
function voltageHarmonics({ emf }: MachineResult): Chart {
  const orders = tellingOrders(emf).filter((order) => order > 1);
  const bars = (['phase', 'line'] as const).flatMap((name) => {
    const { order, harmonic_rms_V, fundamental_rms_V } = emf[name];
    return orders.map((n) => ({
      name,
      order: n,
      share: (100 * (harmonic_rms_V[order.indexOf(n)] ?? 0)) / fundamental_rms_V,
    }));
  });
  const svg = draw({
    ariaLabel: 'Harmonics of phase and line EMF in percent of the fundamental',
    fx: { label: 'harmonic order', labelAnchor: 'center', labelArrow: 'none', padding: 0.25 },
    x: { axis: null, domain: ['phase', 'line'], padding: 0.08 },
    y: { label: 'rms in % of the fundamental', labelArrow: 'none', grid: true, nice: true, ticks: 5 },
    marks: [
      Plot.barY(bars, {
        fx: 'order',
        x: 'name',
        y: 'share',
        fill: (bar: { name: string }) => colourOf(bar.name === 'phase' ? 0 : 1),
      }),
      Plot.text(bars, {
        fx: 'order',
        x: 'name',
        y: 'share',
        text: (bar: { share: number }) => barText(bar.share),
        dy: -8,
        fontSize: 11.5,
        fill: 'currentColor',
      }),
      Plot.ruleY([0], { strokeOpacity: 0.6 }),
    ],
  });
  return {
    heading: 'Harmonics of the EMF',
    legend: (['phase', 'line'] as const).map((label, k) => ({ label, colour: colourOf(k), dash: 'none' })),
    svg,
    caption: `Fundamentals: phase ${figure(emf.phase.fundamental_rms_V)} V rms, line ${figure(emf.line.fundamental_rms_V)} V rms.`,
  };
}

const barText = (share: number): string => (share < 0.005 ? '0' : figure(share, 2));
const colourOf = (k: number): string => seriesColours[k % seriesColours.length];
const dashOf = (k: number): string => seriesDashes[k % seriesDashes.length];

function draw(options: Plot.PlotOptions): string {
  const { document } = parseHTML('<!doctype html><html><body></body></html>');
  const svg = Plot.plot({ ...size, style: { fontSize: '13px', background: 'none' }, ...options, document });
  return svg.outerHTML;
}
