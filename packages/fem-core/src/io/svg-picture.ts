import { type Mesh, nodeCount, triangleCount, triangleNodes } from '../mesh/mesh.js';
import { decimalsOf, niceStep, scaleColour } from './colour-scale.js';
import { chainPieces, choosePatches, outlineAbove, type Trace, traceLevel } from './contours.js';
import { buildDrawingMesh, type DrawingMesh, pointsAlongEdge, valuesAtPoints } from './drawing-mesh.js';
import { distanceToSegment, type GridLine, pathData } from './svg-path.js';
import { escapeXml } from './xml-text.js';

/** What a field picture shows. */
export interface PictureData {
  readonly mesh: Mesh;
  /** Float64Array(n + e): vector potential at every node, Wb/m. */
  readonly potential: Float64Array;
  /** Float64Array(6m): |B| in T at the six nodes of each triangle, in local order; may jump between triangles. */
  readonly magnitude: Float64Array;
}

/** Where the section is drawn once more: x becomes dx - x where mirrorX, else dx + x; y becomes -y where mirrorY. */
export interface PictureCopy {
  readonly mirrorX: boolean;
  readonly mirrorY: boolean;
  /** Metres. */
  readonly dx: number;
}

export interface PictureOptions {
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

/** Grid units per pixel: path data is whole numbers in a group scaled down by it. */
const grid = 10;
/** The drawing fits into this square, in pixels; texts and scales come on top. */
const drawingSize = 760;
const margin = { left: 16, top: 46, right: 92, bottom: 40 } as const;
const ink = '#1d1d1f';

interface Frame {
  /** Metres. */
  readonly xMin: number;
  readonly xMax: number;
  readonly yMin: number;
  readonly yMax: number;
}

/** From metres to the drawing grid: X = unit (x - xMin), Y = unit (yMax - y). */
interface Placement {
  readonly frame: Frame;
  readonly unit: number;
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
  const placement = placeOnGrid(mesh, frameOf(drawing.xy, options));
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
    width: margin.left + width + margin.right,
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

/** A round end of the colour scale in T that all but half a percent of the area stays under. */
export function colourScaleEnd(mesh: Mesh, magnitude: Float64Array): number {
  const parts = Array.from({ length: triangleCount(mesh) }, (_, t) => {
    let sum = 0;
    for (let k = 0; k < 6; k++) sum += magnitude[6 * t + k];
    return { value: sum / 6, area: cornerArea(mesh, t) };
  }).sort((a, b) => b.value - a.value);
  const total = parts.reduce((sum, part) => sum + part.area, 0);
  let above = 0;
  for (const part of parts) {
    above += part.area;
    if (above < 0.005 * total) continue;
    if (!(part.value > 0)) break;
    const step = niceStep(part.value / 20);
    return round(Math.ceil(part.value / step - 1e-9) * step);
  }
  return 1;
}

function cornerArea(mesh: Mesh, t: number): number {
  const [a, b, c] = [0, 1, 2].map((k) => 2 * mesh.triangles[3 * t + k]);
  const { xy } = mesh;
  return 0.5 * ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[c] - xy[a]) * (xy[b + 1] - xy[a + 1]));
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

const round = (value: number): number => Number(value.toPrecision(12));
const short = (value: number): string => String(Number(value.toFixed(2)));

function frameOf(xy: Float64Array, { copies = [], heights }: PictureOptions): Frame {
  let [xMin, xMax, yMin, yMax] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const copy of [{ mirrorX: false, mirrorY: false, dx: 0 }, ...copies]) {
    for (let i = 0; i < xy.length; i += 2) {
      const x = copy.dx + (copy.mirrorX ? -xy[i] : xy[i]);
      const y = copy.mirrorY ? -xy[i + 1] : xy[i + 1];
      xMin = Math.min(xMin, x);
      xMax = Math.max(xMax, x);
      yMin = Math.min(yMin, y);
      yMax = Math.max(yMax, y);
    }
  }
  if (heights === undefined) return { xMin, xMax, yMin, yMax };
  return { xMin, xMax, yMin: Math.max(yMin, heights[0]), yMax: Math.min(yMax, heights[1]) };
}

/** Rounds the scale so that the section's own width is a whole even number of grid units: its copies then abut exactly. */
function placeOnGrid(mesh: Mesh, frame: Frame): Placement {
  let [left, right] = [Infinity, -Infinity];
  for (let i = 0; i < mesh.xy.length; i += 2) {
    left = Math.min(left, mesh.xy[i]);
    right = Math.max(right, mesh.xy[i]);
  }
  const wanted = (grid * drawingSize) / Math.max(frame.xMax - frame.xMin, frame.yMax - frame.yMin);
  const half = (right - left) / 2;
  return { frame, unit: Math.max(1, Math.round(wanted * half)) / half };
}

function toGrid(trace: Trace, { frame, unit }: Placement): GridLine {
  const xy = trace.xy.map((value, k) =>
    Math.round(k % 2 === 0 ? unit * (value - frame.xMin) : unit * (frame.yMax - value)),
  );
  return { xy, closed: trace.closed };
}

function copyElement({ mirrorX, mirrorY, dx }: PictureCopy, { frame, unit }: Placement, id: string): string {
  // X' = unit (dx - x - xMin) = -X + unit (dx - 2 xMin), and Y' = unit (yMax + y) = -Y + 2 unit yMax.
  const shiftX = Math.round(unit * (mirrorX ? dx - 2 * frame.xMin : dx));
  const shiftY = mirrorY ? Math.round(2 * unit * frame.yMax) : 0;
  return `<use href="#${escapeXml(id)}" transform="matrix(${mirrorX ? -1 : 1} 0 0 ${mirrorY ? -1 : 1} ${shiftX} ${shiftY})"/>`;
}

interface ColourScale {
  readonly end: number;
  readonly step: number;
  readonly bands: number;
}

function colourScale(end: number): ColourScale {
  const step = niceStep(end / 20);
  const bands = Math.max(1, Math.round(end / step));
  return { end: round(bands * step), step, bands };
}

/** Colour of the band that starts at k steps; k = bands is what exceeds the scale. */
const bandColour = (scale: ColourScale, k: number): string => scaleColour(k / scale.bands);

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

/** Every side (triangle, local edge) beyond which another region lies. */
function forEachBorder(mesh: Mesh, visit: (t: number, k: number) => void): void {
  for (let t = 0; t < triangleCount(mesh); t++) {
    for (let k = 0; k < 3; k++) {
      const across = mesh.neighbours[3 * t + k];
      if (across >= 0 && mesh.triangleToRegion[across] !== mesh.triangleToRegion[t]) visit(t, k);
    }
  }
}

/** For each region the edges on which it borders another one, x0 y0 x1 y1 each, pixels. */
function borderSegments({ mesh }: DrawingMesh, placement: Placement): number[][] {
  const segments: number[][] = mesh.regionNames.map(() => []);
  forEachBorder(mesh, (t, k) => {
    for (const corner of [mesh.triangles[3 * t + ((k + 1) % 3)], mesh.triangles[3 * t + ((k + 2) % 3)]]) {
      segments[mesh.triangleToRegion[t]].push(...toPixels(mesh.xy, corner, placement));
    }
  });
  return segments;
}

function toPixels(xy: Float64Array, point: number, { frame, unit }: Placement): readonly [x: number, y: number] {
  return [(unit * (xy[2 * point] - frame.xMin)) / grid, (unit * (frame.yMax - xy[2 * point + 1])) / grid];
}

interface Box {
  readonly x: number;
  readonly y: number;
  readonly halfWidth: number;
}

const labelSize = 12;
const keyLine = 18;

/** Region names where there is room for them, else a number in the region and the name in a key below the drawing. */
function placeNames(
  drawing: DrawingMesh,
  placement: Placement,
  size: { readonly width: number; readonly height: number },
): { readonly inside: string[]; readonly key: string[]; readonly keyHeight: number } {
  const borders = borderSegments(drawing, placement);
  const placed: Box[] = [];
  const inside: string[] = [];
  const numbered: string[] = [];
  drawing.mesh.regionNames.forEach((name, region) => {
    const halfWidth = textWidth(name, labelSize) / 2 + 3;
    const spot = roomiestSpot(drawing, region, borders[region], (0.7 * labelSize) / halfWidth, placement);
    if (spot === undefined) return;
    const box = { x: spot.x, y: spot.y, halfWidth };
    const fits = spot.room > labelSize && placed.every((other) => apart(box, other));
    placed.push(fits ? box : { ...box, halfWidth: 9 });
    inside.push(fits ? label(box, name) : badge(box, numbered.push(name)));
  });
  const key = numbered.map((name, k) => {
    const box = { x: 9, y: size.height + margin.bottom + keyLine * (k + 0.5), halfWidth: 9 };
    const text = escapeXml(fitText(name, size.width - 40, labelSize));
    return `${badge(box, k + 1)}<text x="24" y="${short(box.y + 4.5)}">${text}</text>`;
  });
  return { inside, key, keyHeight: numbered.length > 0 ? keyLine * numbered.length + 8 : 0 };
}

const label = ({ x, y }: Box, text: string): string =>
  `<text x="${short(x)}" y="${short(y + 0.35 * labelSize)}" font-size="${labelSize}" text-anchor="middle" stroke="#ffffff" stroke-opacity="0.85" stroke-width="3.5" stroke-linejoin="round" paint-order="stroke">${escapeXml(text)}</text>`;

const badge = ({ x, y }: Box, number: number): string =>
  `<circle cx="${short(x)}" cy="${short(y)}" r="7.5" fill="#ffffff" stroke="${ink}" stroke-width="0.8"/><text x="${short(x)}" y="${short(y + 3.8)}" font-size="10.5" text-anchor="middle">${number}</text>`;

const apart = (a: Box, b: Box): boolean =>
  Math.abs(a.y - b.y) > 1.3 * labelSize || Math.abs(a.x - b.x) > a.halfWidth + b.halfWidth;

/**
 * Among the points of the region the one farthest from its borders and the frame; `room` in pixels, widths counting
 * `flatten` times, so that a flat text finds a flat place. Sides of the section where an image goes on are no borders.
 */
function roomiestSpot(
  { mesh, pieces, corners, xy }: DrawingMesh,
  region: number,
  border: readonly number[],
  flatten: number,
  placement: Placement,
): { readonly x: number; readonly y: number; readonly room: number } | undefined {
  const { frame, unit } = placement;
  const width = (unit * (frame.xMax - frame.xMin)) / grid;
  const height = (unit * (frame.yMax - frame.yMin)) / grid;
  const flat = border.map((value, k) => (k % 2 === 0 ? flatten * value : value));
  let best: { x: number; y: number; room: number } | undefined;
  for (let q = 0; q < corners.length; q += 3) {
    if (mesh.triangleToRegion[Math.floor(q / (3 * pieces * pieces))] !== region) continue;
    const [x, y] = toPixels(xy, corners[q], placement);
    let room = Math.min(y, height - y, flatten * x, flatten * (width - x));
    // Once nearer to a border than the best spot so far, a spot is out.
    for (let s = 0; s < flat.length && room > (best?.room ?? 0); s += 4) {
      room = Math.min(room, distanceToSegment(flatten * x, y, flat[s], flat[s + 1], flat[s + 2], flat[s + 3]));
    }
    if (room > (best?.room ?? 0)) best = { x, y, room };
  }
  return best;
}

/** Good enough for layout: the mean width of a sans-serif letter is a little over half its size. */
const textWidth = (text: string, size: number): number => 0.56 * size * [...text].length;

function fitText(text: string, width: number, size: number): string {
  const letters = [...text];
  const most = Math.floor(width / (0.56 * size));
  return letters.length <= most ? text : `${letters.slice(0, most - 1).join('')}…`;
}

/** A length to compare with, and what one step between flux lines is worth. */
function scaleBar(
  { unit }: Placement,
  drawing: { readonly width: number; readonly height: number },
  fluxStep: number,
): string[] {
  const pixelsPerMm = unit / grid / 1000;
  const millimetres = niceStep(60 / pixelsPerMm);
  const length = millimetres * pixelsPerMm;
  const y = drawing.height + 20;
  const lines = [
    `<path d="M0.5 ${short(y - 5)}v10m0-5h${short(length)}m0-5v10" fill="none" stroke="${ink}" stroke-width="1.4"/>`,
    `<text x="${short(length + 8)}" y="${short(y + 4.5)}">${millimetres} mm</text>`,
  ];
  if (fluxStep > 0) {
    const text = `${Number((1000 * fluxStep).toPrecision(3))} mWb per metre of depth between flux lines`;
    lines.push(`<text x="${short(length + 90)}" y="${short(y + 4.5)}">${text}</text>`);
  }
  return lines;
}

function colourBar(scale: ColourScale, { x, height }: { readonly x: number; readonly height: number }): string[] {
  const cap = 16;
  const top = 24 + cap;
  const band = (height - top) / scale.bands;
  const yOf = (k: number): number => height - k * band;
  const labelStep = niceStep(scale.end / 10);
  const every = Math.max(1, Math.round(labelStep / scale.step));
  const parts = [
    `<text x="${short(x)}" y="12" font-weight="600">|B| in T</text>`,
    `<path d="M${short(x)} ${short(top)}h18l-9-${cap - 2}z" fill="${bandColour(scale, scale.bands)}" stroke="${ink}" stroke-width="0.6"/>`,
  ];
  for (let k = 0; k < scale.bands; k++) {
    parts.push(
      `<rect x="${short(x)}" y="${short(yOf(k + 1))}" width="18" height="${short(band + (k === 0 ? 0 : 0.5))}" fill="${bandColour(scale, k)}"/>`,
    );
  }
  parts.push(
    `<rect x="${short(x)}" y="${short(top)}" width="18" height="${short(height - top)}" fill="none" stroke="${ink}" stroke-width="0.6"/>`,
  );
  for (let k = 0; k <= scale.bands; k += every) {
    const text = (k * scale.step).toFixed(decimalsOf(labelStep));
    parts.push(
      `<path d="M${short(x + 18)} ${short(yOf(k))}h5" stroke="${ink}"/><text x="${short(x + 27)}" y="${short(yOf(k) + 4.5)}">${text}</text>`,
    );
  }
  return parts;
}
