import { type Mesh, triangleCount } from '../mesh/mesh.js';
import type { DrawingMesh } from './drawing-mesh.js';
import { fitText, grid, ink, margin, type Placement, short, textWidth, toPixels } from './picture-frame.js';
import { distanceToSegment } from './svg-path.js';
import { escapeXml } from './xml-text.js';

/** Every side (triangle, local edge) beyond which another region lies, and those on a round outline, which no frame shows. */
export function forEachBorder(mesh: Mesh, visit: (t: number, k: number) => void): void {
  for (let t = 0; t < triangleCount(mesh); t++) {
    for (let k = 0; k < 3; k++) {
      const across = mesh.neighbours[3 * t + k];
      const parts = across < 0 ? isRound(mesh, 3 * t + k) : mesh.triangleToRegion[across] !== mesh.triangleToRegion[t];
      if (parts) visit(t, k);
    }
  }
}

const isRound = (mesh: Mesh, side: number): boolean =>
  mesh.curves[mesh.edgeToCurve[mesh.triangleToEdge[side]]]?.kind === 'arc';

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

interface Box {
  readonly x: number;
  readonly y: number;
  readonly halfWidth: number;
}

const labelSize = 12;
const keyLine = 18;

/** Region names where there is room for them, else a number in the region and the name in a key below the drawing. */
export function placeNames(
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

/** Edges of a border, and points of a picture, that are looked at: more place no name better. */
const ENOUGH_EDGES = 1000;
const ENOUGH_SPOTS = 40_000;

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
  const step = 4 * Math.ceil(border.length / (4 * ENOUGH_EDGES)); // a fine mesh has edges far shorter than letters
  const flat = border.filter((_, k) => k % step < 4).map((value, k) => (k % 2 === 0 ? flatten * value : value));
  let best: { x: number; y: number; room: number } | undefined;
  const stride = 3 * Math.max(1, Math.floor(corners.length / (3 * ENOUGH_SPOTS)));
  for (let q = 0; q < corners.length; q += stride) {
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
