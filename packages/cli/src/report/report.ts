import { escapeXml } from '@gapwright/fem-core/text';
import type { MachineResult } from '@gapwright/machine-models';
import { plainText } from '../plain-text.js';
import type { Sheet, SheetBlock, SheetGroup, SheetRow, SheetTable } from '../sheet-parts.js';
import { type Chart, drawCharts } from './charts.js';
import { pageStyle } from './page-style.js';

/** Nothing may be fetched, run, embedded or sent, whatever a name in the machine file tried. */
const policy = "default-src 'none'; style-src 'unsafe-inline'; img-src data:; base-uri 'none'; form-action 'none'";

/**
 * The report as one HTML file that needs nothing else: datasheet, charts, field pictures, warnings, cautions.
 *
 * @param pictures  an SVG a slice, with ids that differ between them
 */
export function reportHtml(sheet: Sheet, result: MachineResult, pictures: readonly string[]): string {
  const title = escapeXml(sheet.title);
  return [
    '<!doctype html>',
    '<html lang="en">',
    '<head>',
    '<meta charset="utf-8">',
    `<meta http-equiv="Content-Security-Policy" content="${policy}">`,
    '<meta name="viewport" content="width=device-width, initial-scale=1">',
    `<title>${title} - Gapwright</title>`,
    `<style>${pageStyle}</style>`,
    '</head>',
    '<body>',
    '<header>',
    `<h1>${title}</h1>`,
    `<p class="stamp">Gapwright ${escapeXml(plainText(result.gapwright))}; input SHA-256 ${escapeXml(result.input_sha256)}</p>`,
    remarksPointer(sheet),
    '</header>',
    '<main>',
    ...sheet.groups.map(groupHtml),
    '<h2>Charts</h2>',
    ...drawCharts(result).map(chartHtml),
    '<h2>Flux lines and flux density</h2>',
    ...pictures.map((picture) => `<figure class="field">\n${picture}</figure>`),
    ...remarksHtml('notes', 'Taken for granted', sheet.notes ?? []),
    ...remarksHtml('warnings', 'Warnings', sheet.warnings),
    ...remarksHtml('cautions', 'Cautions', sheet.cautions),
    '</main>',
    '</body>',
    '</html>',
    '',
  ].join('\n');
}

function remarksPointer({ warnings, cautions }: Sheet): string {
  const counted = (list: readonly string[], name: string): string[] =>
    list.length === 0 ? [] : [`<a href="#${name}s">${list.length} ${name}${list.length === 1 ? '' : 's'}</a>`];
  const links = [...counted(warnings, 'warning'), ...counted(cautions, 'caution')];
  return links.length === 0 ? '' : `<p>${links.join(' and ')} at the end.</p>`;
}

function groupHtml({ heading, blocks }: SheetGroup): string {
  return [`<section><h2>${escapeXml(heading)}</h2>`, ...blocks.map(blockHtml), '</section>'].join('\n');
}

function blockHtml(block: SheetBlock): string {
  if (block.kind === 'table') return tableHtml(block);
  return ['<table class="rows">', ...block.rows.map(rowHtml), '</table>'].join('\n');
}

function rowHtml({ label, value, note }: SheetRow): string {
  const noted = note === undefined ? '' : ` <span class="note">${escapeXml(note)}</span>`;
  return `<tr><th scope="row">${escapeXml(label)}</th><td>${escapeXml(value)}${noted}</td></tr>`;
}

function tableHtml({ columns, rows, caption }: SheetTable): string {
  const head = columns.map(
    ({ name, unit }) =>
      `<th scope="col">${escapeXml(name)}<span class="unit">${unit === '' ? '&nbsp;' : escapeXml(unit)}</span></th>`,
  );
  return [
    '<div class="wide"><table class="columns">',
    `<thead><tr>${head.join('')}</tr></thead>`,
    '<tbody>',
    ...rows.map((row) => `<tr>${row.map((cell) => `<td>${escapeXml(cell)}</td>`).join('')}</tr>`),
    '</tbody></table></div>',
    ...(caption === undefined ? [] : [`<p class="caption">${escapeXml(caption)}</p>`]),
  ].join('\n');
}

function chartHtml({ heading, legend, svg, caption }: Chart): string {
  const entries = legend.map(
    ({ label, colour, dash }) =>
      `<li><svg width="34" height="10" aria-hidden="true"><path d="M0 5h34" fill="none" stroke="${colour}" stroke-width="2.4" stroke-dasharray="${dash}"/></svg>${escapeXml(label)}</li>`,
  );
  return [
    `<h3>${escapeXml(heading)}</h3>`,
    `<figure><ul class="legend">${entries.join('')}</ul>`,
    svg,
    `<figcaption class="caption">${escapeXml(caption)}</figcaption></figure>`,
  ].join('\n');
}

function remarksHtml(id: string, heading: string, texts: readonly string[]): string[] {
  if (texts.length === 0) return [];
  return [
    `<section id="${id}" class="${id}"><h2>${heading}</h2>`,
    '<ul class="remarks">',
    ...texts.map((text) => `<li>${escapeXml(text)}</li>`),
    '</ul></section>',
  ];
}
