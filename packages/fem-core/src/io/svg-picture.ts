import { type Mesh, nodeCount, triangleCount, triangleNodes } from '../mesh/mesh.js';
import { chainPieces, choosePatches, outlineAbove, traceLevel } from './contours.js';
import { buildDrawingMesh, type DrawingMesh, pointsAlongEdge, valuesAtPoints } from './drawing-mesh.js';
import {
  fitText,
  frameOf,
  grid,
  ink,
  leastWidth,
  margin,
  type PictureCopy,
  type Placement,
  placeOnGrid,
  short,
  toGrid,
} from './picture-frame.js';
import { bandColour, type ColourScale, colourBar, colourScale, colourScaleEnd, scaleBar } from './picture-scales.js';
import { forEachBorder, placeNames } from './region-names.js';
import { type GridLine, pathData } from './svg-path.js';
import { escapeXml } from './xml-text.js';

export type { PictureCopy } from './picture-frame.js';
export { colourScaleEnd } from './picture-scales.js';

/** What a field picture shows. */
export interface PictureData {
  /** m triangles, n + e nodes. */
  readonly mesh: Mesh;
  /** Float64Array(n + e): vector potential at every node, Wb/m. */
  readonly potential: Float64Array;
  /** Float64Array(6m): |B| in T at the six nodes of each triangle, in local order; may jump between triangles. */
  readonly magnitude: Float64Array;
}

/** How it is shown. */
export interface PictureOptions {
  /** Above the picture. */
  readonly title: string;
  /** Images beside the section itself, for a symmetry that the mesh makes use of. |B| must be the same in them. */
  readonly copies?: readonly PictureCopy[];
  /** End of the colour scale in T; by default what `colourScaleEnd` proposes. */
  readonly scaleEnd?: number;
  /** Lowest and highest y that is shown, metres; all by default. */
  readonly heights?: readonly [from: number, to: number];
  /** Flux lines between A = 0 and the largest |A|; 12 by default. */
  readonly fluxLines?: number;
  /** Put before every id, so that several pictures can stand in one document. */
  readonly idPrefix?: string;
}

/**
 * A self-contained SVG of a solved section, to scale: |B| as a map with its scale, flux lines at equal flux steps, and
 * the borders of the regions with their names. Holds no script and no reference to anything outside.
 *
 * Between two neighbouring flux lines flows the same flux; the lines lie half a step off the largest and the smallest
 * A, so that they go on evenly into mirror images. |B| is averaged per node within each region, so it may jump at the
 * borders of regions. What exceeds the scale has the colour of the scale's cap.
 */
export function drawField(data: PictureData, options: PictureOptions): string {
  const { mesh } = data;
  const drawing = buildDrawingMesh(mesh);
  const placement = placeOnGrid(mesh, frameOf(drawing.xy, options.copies ?? [], options.heights));
  const prefix = options.idPrefix ?? '';
  const width = (placement.unit * (placement.frame.xMax - placement.frame.xMin)) / grid;
  const height = (placement.unit * (placement.frame.yMax - placement.frame.yMin)) / grid;
  const scale = colourScale(options.scaleEnd ?? colourScaleEnd(mesh, data.magnitude));
  const flux = fluxLevels(data.potential, options.fluxLines ?? 12);
  const names = placeNames(drawing, placement, { width, height });
  const layers = [
    {
      id: `${prefix}map`,
      style: 'fill-rule="evenodd" shape-rendering="crispEdges"',
      content: bandPaths(data, drawing, placement, scale),
    },
    {
      id: `${prefix}lines`,
      style: `fill="none" stroke="${ink}" stroke-linejoin="round"`,
      content: linePaths(data, drawing, placement, flux.levels),
    },
  ];
  const total = {
    width: Math.max(leastWidth, margin.left + width + margin.right),
    height: margin.top + height + margin.bottom + names.keyHeight,
  };
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${short(total.width)} ${short(total.height)}" width="${short(total.width)}" height="${short(total.height)}" role="img" font-family="system-ui, 'Helvetica Neue', Arial, sans-serif" font-size="13" fill="${ink}">`,
    `<title>${escapeXml(options.title)}</title>`,
    '<rect width="100%" height="100%" fill="#ffffff"/>',
    `<text x="${margin.left}" y="28" font-size="16" font-weight="600">${escapeXml(fitText(options.title, total.width - 2 * margin.left, 16))}</text>`,
    `<g transform="translate(${margin.left} ${margin.top})">`,
    `<svg width="${short(width)}" height="${short(height)}"><g transform="scale(${1 / grid})">`,
    ...layers.flatMap(({ id, style, content }) => [
      `<g id="${escapeXml(id)}" ${style}>`,
      ...content,
      '</g>',
      ...(options.copies ?? []).map((copy) => copyElement(copy, placement, id)),
    ]),
    '</g></svg>',
    `<rect width="${short(width)}" height="${short(height)}" fill="none" stroke="${ink}"/>`,
    ...names.inside,
    ...scaleBar(placement, { width, height }, flux.step),
    ...names.key,
    ...colourBar(scale, { x: width + 20, height: Math.min(height, 420) }),
    '</g>',
    '</svg>',
    '',
  ].join('\n');
}

/** Averages the per-triangle values at each node over the triangles of one region. Float64Array(n + e), 0 elsewhere. */
export function averageInRegion(mesh: Mesh, perTriangle: Float64Array, region: number): Float64Array {
  const sums = new Float64Array(nodeCount(mesh));
  const counts = new Int32Array(nodeCount(mesh));
  const six = new Int32Array(6);
  for (let t = 0; t < triangleCount(mesh); t++) {
    if (mesh.triangleToRegion[t] !== region) continue;
    triangleNodes(mesh, t, six);
    for (let k = 0; k < 6; k++) {
      sums[six[k]] += perTriangle[6 * t + k];
      counts[six[k]]++;
    }
  }
  return sums.map((sum, node) => (counts[node] > 0 ? sum / counts[node] : 0));
}

function copyElement({ mirrorX, mirrorY, dx }: PictureCopy, { frame, unit }: Placement, id: string): string {
  // X' = unit (dx - x - xMin) = -X + unit (dx - 2 xMin), and Y' = unit (yMax + y) = -Y + 2 unit yMax; twice the rounded
  // place of y = 0, so that the images meet there.
  const shiftX = Math.round(unit * (mirrorX ? dx - 2 * frame.xMin : dx));
  const shiftY = mirrorY ? 2 * Math.round(unit * frame.yMax) : 0;
  return `<use href="#${escapeXml(id)}" transform="matrix(${mirrorX ? -1 : 1} 0 0 ${mirrorY ? -1 : 1} ${shiftX} ${shiftY})"/>`;
}

/**
 * One path a level, each over the ones before it: every band reaches under the next and all regions share the path of
 * their level, so no seam shows between bands or regions (nor, drawn with crisp edges, between images).
 */
function bandPaths(data: PictureData, drawing: DrawingMesh, placement: Placement, scale: ColourScale): string[] {
  const { mesh } = data;
  const regions = mesh.regionNames.map((_, region) => ({
    patches: choosePatches(drawing, (t) => mesh.triangleToRegion[t] === region),
    values: valuesAtPoints(drawing, averageInRegion(mesh, data.magnitude, region)),
  }));
  const paths: string[] = [];
  for (let k = 0; k <= scale.bands; k++) {
    const level = k === 0 ? -Infinity : k * scale.step;
    const lines = regions.flatMap(({ patches, values }) => outlineAbove(patches, values, level));
    const d = pathData(
      lines.map((line) => toGrid(line, placement)),
      0.6,
    );
    if (d !== '') paths.push(`<path d="${d}" fill="${bandColour(scale, k)}"/>`);
  }
  return paths;
}

/** Levels of A half a step inside its extremes, and the step in Wb/m. */
function fluxLevels(
  potential: Float64Array,
  lines: number,
): { readonly levels: readonly number[]; readonly step: number } {
  let [least, most] = [Infinity, -Infinity];
  for (const a of potential) {
    least = Math.min(least, a);
    most = Math.max(most, a);
  }
  const largest = Math.max(Math.abs(least), Math.abs(most));
  if (!(most - least > 1e-12 * largest)) return { levels: [], step: 0 };
  const count = Math.max(1, Math.round(((most - least) / largest) * lines));
  const step = (most - least) / count;
  return { levels: Array.from({ length: count }, (_, k) => least + (k + 0.5) * step), step };
}

/** Flux lines and, lighter, the borders of regions. */
function linePaths(data: PictureData, drawing: DrawingMesh, placement: Placement, levels: readonly number[]): string[] {
  const whole = choosePatches(drawing);
  const potential = valuesAtPoints(drawing, data.potential);
  const traces = levels.flatMap((level) => traceLevel(whole, potential, level));
  const flux = pathData(
    traces.map((line) => toGrid(line, placement)),
    0.6,
  );
  const borders = pathData(borderLines(drawing, placement), 0.3);
  return [
    `<path d="${borders}" stroke="#33415c" stroke-width="${0.8 * grid}"/>`,
    `<path d="${flux}" stroke-width="${0.9 * grid}"/>`,
  ];
}

/** Edges between two regions, as grid lines. */
function borderLines(drawing: DrawingMesh, placement: Placement): GridLine[] {
  const { mesh, xy } = drawing;
  const from: number[] = [];
  const to: number[] = [];
  forEachBorder(mesh, (t, k) => {
    if (mesh.triangleToRegion[mesh.neighbours[3 * t + k]] < mesh.triangleToRegion[t]) return;
    const points = pointsAlongEdge(drawing, t, k);
    from.push(...points.slice(0, -1));
    to.push(...points.slice(1));
  });
  return chainPieces(from, to).map(({ keys, closed }) =>
    toGrid({ xy: keys.flatMap((point) => [xy[2 * point], xy[2 * point + 1]]), closed }, placement),
  );
}
