import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { describe, expect, test } from 'vitest';
import { niceStep, scaleColour } from '../../../packages/fem-core/src/io/colour-scale.js';
import { pathData } from '../../../packages/fem-core/src/io/svg-path.js';
import { averageInRegion, colourScaleEnd, drawField } from '../../../packages/fem-core/src/io/svg-picture.js';
import { nodePoint, triangleCount, triangleNodes } from '../../../packages/fem-core/src/mesh/mesh.js';
import { atNodes, gridMesh } from './grid-mesh.js';

const pitch = 0.05;
const mesh = gridMesh({
  from: [0, 0],
  to: [pitch / 2, 0.02],
  columns: 20,
  rows: 16,
  regionNames: ['gap', 'a <b>&"magnet\'\u0007'],
  regionAt: (_, y) => (y < 0.01 ? 0 : 1),
});
const k = Math.PI / pitch;
const potential = atNodes(mesh, (x, y) => -(0.5 / k) * Math.sin(k * x) * Math.cosh(k * y));
const magnitude = perTriangle(
  (x, y) => 0.5 * Math.hypot(Math.sin(k * x) * Math.sinh(k * y), Math.cos(k * x) * Math.cosh(k * y)),
);
const copies = [
  { mirrorX: true, mirrorY: false, dx: 0 },
  { mirrorX: false, mirrorY: true, dx: 0 },
  { mirrorX: true, mirrorY: true, dx: 0 },
];

function perTriangle(f: (x: number, y: number) => number): Float64Array {
  const values = new Float64Array(6 * triangleCount(mesh));
  const six = new Int32Array(6);
  for (let t = 0; t < triangleCount(mesh); t++) {
    triangleNodes(mesh, t, six).forEach((node, local) => {
      values[6 * t + local] = f(...nodePoint(mesh, node));
    });
  }
  return values;
}

describe('a field picture', () => {
  const picture = drawField({ mesh, potential, magnitude }, { title: 'Slice <1> & "more"', copies });

  test('is well-formed, with every text escaped and nothing that runs or is fetched', () => {
    expect(XMLValidator.validate(picture)).toBe(true);
    expect(picture).toContain('Slice &lt;1&gt; &amp; &quot;more&quot;');
    expect(picture).toContain('a &lt;b&gt;&amp;&quot;magnet&#39;\ufffd');
    expect(picture).not.toMatch(/<script|<foreignObject|<image|<style|\son\w+=/i);
    const links = [...picture.matchAll(/href="([^"]*)"/g)].map((match) => match[1]);
    expect(links).toHaveLength(2 * copies.length);
    expect(links.every((link) => link.startsWith('#'))).toBe(true);
  });

  test('has the same bytes each time it is drawn', () => {
    expect(drawField({ mesh, potential, magnitude }, { title: 'Slice <1> & "more"', copies })).toBe(picture);
  });

  test('is drawn to scale: the bar is as long as it says, the copies abut exactly', () => {
    const frame = /<rect width="([\d.]+)" height="([\d.]+)" fill="none" stroke="#1d1d1f"\/>/.exec(picture);
    const [width, height] = [Number(frame?.[1]), Number(frame?.[2])];
    expect(width / height).toBeCloseTo(pitch / 0.04, 3);
    const bar = /v10m0-5h([\d.]+)m0-5v10/.exec(picture);
    const millimetres = /<text[^>]*>(\d+) mm</.exec(picture);
    expect(Number(bar?.[1]) / Number(millimetres?.[1])).toBeCloseTo(width / (1000 * pitch), 2);
    const mirrored = /matrix\(-1 0 0 1 (\d+) 0\)/.exec(picture);
    // x = 0 is half-way across, ten grid units to a pixel; X' = shift - X must map it to itself.
    expect(Number(mirrored?.[1])).toBe(Math.round(10 * width));
  });

  test('shows no more than the heights asked for, and images still meet at y = 0', () => {
    const heights = [-0.012345, 0.0123] as const;
    const cropped = drawField({ mesh, potential, magnitude }, { title: 'x', copies, heights });
    const [, width, height] = /<svg width="([\d.]+)" height="([\d.]+)">/.exec(cropped) ?? [];
    expect(Number(width) / Number(height)).toBeCloseTo(pitch / (heights[1] - heights[0]), 3);
    const shift = Number(/matrix\(1 0 0 -1 0 (\d+)\)/.exec(cropped)?.[1]);
    // Ten grid units to a pixel; y = 0 has a whole place on the grid, and is its own image.
    expect(shift % 2).toBe(0);
    expect(shift / 2).toBeCloseTo(10 * Number(height) * (heights[1] / (heights[1] - heights[0])), 0);
  });

  test('shows flux lines between which equal flux flows, and says how much', () => {
    const step = Number(/>([\d.]+) mWb per metre of depth/.exec(picture)?.[1]);
    const largest = Math.max(...potential.map(Math.abs));
    expect(step).toBeCloseTo((1000 * largest) / 12, 1);
    const lines = /<path d="([^"]*)" stroke-width="9"\/>/.exec(picture)?.[1] ?? '';
    expect(lines.match(/M/g)?.length).toBe(12);
  });

  test('keeps ids apart when two stand in one document', () => {
    const other = drawField({ mesh, potential, magnitude }, { title: 'x', copies, idPrefix: 'slice-2-' });
    const ids = (text: string) => [...text.matchAll(/\bid="([^"]*)"/g)].map((match) => match[1]);
    expect(ids(picture).some((id) => ids(other).includes(id))).toBe(false);
  });

  test('without any field still is a picture', () => {
    const nothing = drawField(
      { mesh, potential: potential.map(() => 0), magnitude: magnitude.map(() => 0) },
      { title: 'nothing' },
    );
    expect(new XMLParser().parse(nothing)).toHaveProperty('svg');
    expect(nothing).not.toContain('NaN');
  });
});

test('a node between two regions gets the mean of each region on its own', () => {
  const jump = perTriangle(() => 0);
  for (let t = 0; t < triangleCount(mesh); t++) jump.fill(mesh.triangleToRegion[t] === 0 ? 0.5 : 2, 6 * t, 6 * t + 6);
  const onBorder = Array.from({ length: mesh.xy.length / 2 }, (_, i) => i).filter(
    (i) => Math.abs(mesh.xy[2 * i + 1] - 0.01) < 1e-9,
  );
  expect(onBorder.length).toBeGreaterThan(10);
  for (const i of onBorder) {
    expect(averageInRegion(mesh, jump, 0)[i]).toBe(0.5);
    expect(averageInRegion(mesh, jump, 1)[i]).toBe(2);
  }
});

test('the colour scale ends at a round figure above all but a sliver of the area', () => {
  const spiked = magnitude.slice();
  spiked.fill(50, 0, 6);
  expect(colourScaleEnd(mesh, spiked)).toBe(colourScaleEnd(mesh, magnitude));
  expect(colourScaleEnd(mesh, magnitude)).toBeGreaterThan(0.5);
  expect(colourScaleEnd(mesh, magnitude)).toBeLessThan(1.2 * Math.max(...magnitude));
});

test('the colours darken steadily, so that the map can be read in grey', () => {
  // Relative luminance by the sRGB weights (WCAG 2, from memory).
  const luminance = (share: number) =>
    [0.2126, 0.7152, 0.0722].reduce((sum, weight, k) => {
      const value = Number.parseInt(scaleColour(share).slice(1 + 2 * k, 3 + 2 * k), 16) / 255;
      return sum + weight * (value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4);
    }, 0);
  for (let k = 0; k < 20; k++) expect(luminance((k + 1) / 20)).toBeLessThan(luminance(k / 20));
  // Lines of #1d1d1f (luminance 0.0123) keep a contrast of at least 2.3 on the darkest colour and 12 on the palest.
  expect((luminance(1) + 0.05) / 0.0623).toBeGreaterThan(2.3);
  expect((luminance(0) + 0.05) / 0.0623).toBeGreaterThan(12);
});

test('nice steps are 1, 2 or 5 times a power of ten', () => {
  expect([0.011, 0.02, 0.07, 1, 1.1, 3, 7, 60].map(niceStep)).toEqual([0.02, 0.02, 0.1, 1, 2, 5, 10, 100]);
});

test('path data leaves out points on straight lines and closes rings', () => {
  expect(pathData([{ xy: [0, 0, 10, 0, 20, 0, 20, -10], closed: false }], 0.5)).toBe('M0 0l20 0 0-10');
  expect(pathData([{ xy: [0, 0, 5, 0, 10, 0, 10, 10, 0, 10], closed: true }], 0.5)).toBe('M0 0l10 0 0 10-10 0z');
  expect(pathData([{ xy: [3, 3, 3, 3], closed: false }], 0.5)).toBe('');
});
