import type { Mesh } from '../mesh/mesh.js';
import type { Trace } from './contours.js';
import type { GridLine } from './svg-path.js';

/** Where the section is drawn once more: x becomes dx - x where mirrorX, else dx + x; y becomes -y where mirrorY. */
export interface PictureCopy {
  /** Left and right are swapped. */
  readonly mirrorX: boolean;
  /** Top and bottom are swapped. */
  readonly mirrorY: boolean;
  /** Metres. */
  readonly dx: number;
}

/** Grid units per pixel: path data is whole numbers in a group scaled down by it. */
export const grid = 10;
/** The drawing fits into this square, in pixels; texts and scales come on top. */
const drawingSize = 760;
/** Room round the drawing in pixels. */
export const margin = { left: 16, top: 46, right: 92, bottom: 40 } as const;
/** A narrower picture would cut its own title and scale bar, in pixels. */
export const leastWidth = 520;
/** Of texts and lines. */
export const ink = '#1d1d1f';

/** The part of the plane that is shown. */
export interface Frame {
  /** Metres. */
  readonly xMin: number;
  readonly xMax: number;
  readonly yMin: number;
  readonly yMax: number;
}

/** From metres to the drawing grid: X = unit (x - xMin), Y = unit (yMax - y). */
export interface Placement {
  readonly frame: Frame;
  readonly unit: number;
}

/** What is shown: the section with its images, between the heights. */
export function frameOf(
  xy: Float64Array,
  copies: readonly PictureCopy[],
  heights: readonly [from: number, to: number] | undefined,
): Frame {
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
export function placeOnGrid(mesh: Mesh, frame: Frame): Placement {
  let [left, right] = [Infinity, -Infinity];
  for (let i = 0; i < mesh.xy.length; i += 2) {
    left = Math.min(left, mesh.xy[i]);
    right = Math.max(right, mesh.xy[i]);
  }
  const wanted = (grid * drawingSize) / Math.max(frame.xMax - frame.xMin, frame.yMax - frame.yMin);
  const half = (right - left) / 2;
  return { frame, unit: Math.max(1, Math.round(wanted * half)) / half };
}

/** A traced line on the drawing grid. */
export function toGrid(trace: Trace, { frame, unit }: Placement): GridLine {
  const xy = trace.xy.map((value, k) =>
    Math.round(k % 2 === 0 ? unit * (value - frame.xMin) : unit * (frame.yMax - value)),
  );
  return { xy, closed: trace.closed };
}

/** A point in pixels from the upper left corner of the frame. */
export function toPixels(xy: Float64Array, point: number, { frame, unit }: Placement): readonly [x: number, y: number] {
  return [(unit * (xy[2 * point] - frame.xMin)) / grid, (unit * (frame.yMax - xy[2 * point + 1])) / grid];
}

/** A length in pixels as text, to a hundredth. */
export const short = (value: number): string => String(Number(value.toFixed(2)));

/** Good enough for layout: the mean width of a sans-serif letter is a little over half its size. */
export const textWidth = (text: string, size: number): number => 0.56 * size * [...text].length;

/** `text`, cut with an ellipsis where it would be wider than `width` pixels. */
export function fitText(text: string, width: number, size: number): string {
  const letters = [...text];
  const most = Math.floor(width / (0.56 * size));
  return letters.length <= most ? text : `${letters.slice(0, most - 1).join('')}…`;
}
