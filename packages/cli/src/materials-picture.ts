import { escapeXml } from '@gapwright/fem-core/text';
import { type Chart, type ChartAxis, type ChartSeries, shareOf, tickText } from './materials-chart.js';
import { cutText, plainText } from './plain-text.js';

const size = { width: 760, height: 560 } as const;
const plot = { left: 66, top: 44, width: 670, height: 414 } as const;
const ink = '#1d1d1f';
const colours = { plain: '#1f5fa8', hot: '#c2410c' } as const;

/** The chart as an SVG document: the same chart gives the same bytes. */
export function chartPicture(title: string, chart: Chart): string {
  const heading = escapeXml(cutText(plainText(title), 80));
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${size.width}" height="${size.height}" viewBox="0 0 ${size.width} ${size.height}" role="img" font-family="system-ui, sans-serif" font-size="13" fill="${ink}">`,
    `<title>${heading}</title>`,
    `<rect width="${size.width}" height="${size.height}" fill="#ffffff"/>`,
    `<text x="${plot.left}" y="26" font-size="17" font-weight="600">${heading}</text>`,
    ...gridLines(chart),
    ...chart.guides.flatMap((guide) => guideLines(guide, chart)),
    ...chart.series.map((series) => seriesPath(series, chart)),
    ...chart.marks.map(([x, y]) => mark(placeX(chart.x, x), placeY(chart.y, y))),
    ...legend(chart),
    '</svg>',
    '',
  ].join('\n');
}

const short = (value: number): string => String(Number(value.toFixed(2)));
const placeX = (axis: ChartAxis, value: number): number => plot.left + plot.width * shareOf(axis, value);
const placeY = (axis: ChartAxis, value: number): number => plot.top + plot.height * (1 - shareOf(axis, value));

function gridLines({ x, y }: Chart): string[] {
  const upright = (value: number): string => `M${short(placeX(x, value))} ${plot.top}v${plot.height}`;
  const level = (value: number): string => `M${plot.left} ${short(placeY(y, value))}h${plot.width}`;
  const bottom = plot.top + plot.height;
  return [
    `<path d="${x.between.map(upright).join('')}" stroke="#eeeeee" fill="none"/>`,
    `<path d="${[...x.ticks.map(upright), ...y.ticks.map(level)].join('')}" stroke="#d0d0d4" fill="none"/>`,
    `<rect x="${plot.left}" y="${plot.top}" width="${plot.width}" height="${plot.height}" fill="none" stroke="${ink}"/>`,
    ...x.ticks.map(
      (tick) =>
        `<text x="${short(placeX(x, tick))}" y="${bottom + 19}" text-anchor="middle">${tickText(x, tick)}</text>`,
    ),
    ...y.ticks.map(
      (tick) =>
        `<text x="${plot.left - 8}" y="${short(placeY(y, tick) + 4.5)}" text-anchor="end">${tickText(y, tick)}</text>`,
    ),
    `<text x="${plot.left + plot.width / 2}" y="${bottom + 40}" text-anchor="middle">${x.label}</text>`,
    `<text transform="translate(18 ${plot.top + plot.height / 2}) rotate(-90)" text-anchor="middle">${y.label}</text>`,
  ];
}

function guideLines({ label, from, to }: Chart['guides'][number], { x, y }: Chart): string[] {
  const [x1, y1] = [placeX(x, to[0]), placeY(y, to[1])];
  return [
    `<path d="M${short(placeX(x, from[0]))} ${short(placeY(y, from[1]))}L${short(x1)} ${short(y1)}" stroke="#8a8a94" stroke-dasharray="2 4" fill="none"/>`,
    `<text x="${short(x1 + 5)}" y="${short(y1 + 14)}" font-size="11" fill="#5f5f68">${label}</text>`,
  ];
}

const colourOf = ({ hot }: ChartSeries): string => (hot ? colours.hot : colours.plain);
const dashOf = ({ broken }: ChartSeries): string => (broken ? ' stroke-dasharray="7 4"' : '');

function seriesPath(series: ChartSeries, { x, y }: Chart): string {
  const d = series.points.map(([h, b]) => `${short(placeX(x, h))} ${short(placeY(y, b))}`).join('L');
  return `<path d="M${d}" stroke="${colourOf(series)}" stroke-width="2"${dashOf(series)} stroke-linejoin="round" fill="none"/>`;
}

const mark = (x: number, y: number): string =>
  `<circle cx="${short(x)}" cy="${short(y)}" r="2.6" fill="#ffffff" stroke="${ink}"/>`;

/** Under the plot: a line for the curves, one for what else is drawn. */
function legend(chart: Chart): string[] {
  const curves = chart.series.map((series) => ({
    sign: (x: number, y: number) =>
      `<path d="M${x} ${y}h26" stroke="${colourOf(series)}" stroke-width="2"${dashOf(series)}/>`,
    label: series.label,
  }));
  const marks =
    chart.marks.length === 0 ? [] : [{ sign: (x: number, y: number) => mark(x + 13, y), label: chart.marksLabel }];
  const guides =
    chart.guides.length === 0
      ? []
      : [
          {
            sign: (x: number, y: number) => `<path d="M${x} ${y}h26" stroke="#8a8a94" stroke-dasharray="2 4"/>`,
            label: chart.guidesLabel,
          },
        ];
  return [curves, [...marks, ...guides]].flatMap((entries, line) => {
    const y = size.height - 38 + 20 * line;
    let x: number = plot.left;
    return entries.flatMap(({ sign, label }) => {
      const at = x;
      x += 56 + 7 * label.length;
      return [sign(at, y - 4.5), `<text x="${at + 34}" y="${y}">${label}</text>`];
    });
  });
}
