import { parseHTML } from 'linkedom';
import { beforeAll, describe, expect, test } from 'vitest';
import { machineEngine } from '../../packages/cli/src/solve-machine.js';
import { makeFolder, readFolder, run, writeMachine } from './run.js';

const hostile = `</title></style><script>alert(1)</script><img src=x onerror=alert(1)>"'&amp;<svg onload=alert(1)>`;

async function reportOf(name: string): Promise<string> {
  const folder = makeFolder();
  const file = writeMachine(['Hut hydro, 106 V link', JSON.stringify(name)]);
  const { status } = await run(['solve', file, '--out', folder, '--quiet'], { engine: machineEngine });
  expect(status).toBe(0);
  return readFolder(folder)['report.html'];
}

describe('the report', () => {
  let html = '';
  let document: ReturnType<typeof parseHTML>['document'];
  beforeAll(async () => {
    html = await reportOf(hostile);
    document = parseHTML(html).document;
  });

  test('shows a name full of HTML as the text it is', () => {
    expect(document.querySelector('h1')?.textContent).toBe(hostile);
    expect(document.querySelector('head title')?.textContent).toBe(`${hostile} - Gapwright`);
  });

  test('holds nothing that runs, embeds, sends or is fetched', () => {
    expect(
      document.querySelectorAll('script, iframe, object, embed, img, image, link, base, form, foreignObject').length,
    ).toBe(0);
    for (const element of document.querySelectorAll('*')) {
      for (const { name, value } of element.attributes) {
        expect(name).not.toMatch(/^on/i);
        expect(value).not.toMatch(/javascript:|url\((?!#)|@import/i);
        if (/^(src|href|xlink:href|action|srcset|data)$/i.test(name)) expect(value).toMatch(/^#/);
      }
    }
    for (const style of document.querySelectorAll('style')) expect(style.textContent).not.toMatch(/url\(|@import/i);
  });

  test('forbids the reader to load or run anything', () => {
    const metas = [...document.querySelectorAll('meta[http-equiv]')];
    expect(metas.map((meta) => meta.getAttribute('http-equiv'))).toEqual(['Content-Security-Policy']);
    const policy = metas[0].getAttribute('content') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toContain('script-src');
  });

  test('has datasheet, charts, a field picture a slice with its scale, and the cautions', () => {
    const headings = [...document.querySelectorAll('h2')].map((heading) => heading.textContent);
    expect(headings).toEqual([
      'Machine',
      'Slices',
      'EMF with no load',
      'Winding',
      'Merit',
      'On its load',
      'Losses and heat',
      'Faults',
      'Magnets at work',
      'Pull and masses',
      'Charts',
      'Flux lines and flux density',
      'Taken for granted',
      'Cautions',
    ]);
    const charts = [...document.querySelectorAll('figure:not(.field)')];
    expect(charts).toHaveLength(4);
    for (const chart of charts) {
      expect(chart.querySelector('svg[aria-label]')).not.toBeNull();
      expect(chart.textContent).toMatch(/, (T|V|deg)|%/);
    }
    const pictures = [...document.querySelectorAll('figure.field > svg')];
    expect(pictures).toHaveLength(3);
    for (const picture of pictures) expect(picture.textContent).toContain('|B| in T');
  });

  test('uses no id twice', () => {
    const ids = [...document.querySelectorAll('[id]')].map(({ id }) => id);
    expect(new Set(ids).size).toBe(ids.length);
    expect(ids.length).toBeGreaterThan(6);
  });

  test('draws finite numbers only', () => {
    expect(html).not.toMatch(/NaN|Infinity|undefined/);
  });

  test('has the same bytes when drawn again in the same process', async () => {
    expect(await reportOf(hostile)).toBe(html);
  });
});
