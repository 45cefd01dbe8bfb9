import { type Mesh, triangleCount } from '../mesh/mesh.js';
import { decimalsOf, niceStep, scaleColour } from './colour-scale.js';
import { grid, ink, type Placement, short } from './picture-frame.js';

/**
 * A round end of the colour scale in T that all but half a percent of the area stays under.
 * @param magnitude  |B| as `PictureData` holds it, Float64Array(6m)
 */
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

/** Takes the last bits off a multiple of a decimal step. */
const round = (value: number): number => Number(value.toPrecision(12));

/** Bands of equal width from 0; what exceeds the end has a colour of its own. */
export interface ColourScale {
  readonly end: number;
  readonly step: number;
  readonly bands: number;
}

export function colourScale(end: number): ColourScale {
  const step = niceStep(end / 20);
  const bands = Math.max(1, Math.round(end / step));
  return { end: round(bands * step), step, bands };
}

/** Colour of the band that starts at k steps; k = bands is what exceeds the scale. */
export const bandColour = (scale: ColourScale, k: number): string => scaleColour(k / scale.bands);

/** A length to compare with, and what one step between flux lines is worth. */
export function scaleBar(
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

/** The colours with their values, the cap for what exceeds them on top. */
export function colourBar(
  scale: ColourScale,
  { x, height }: { readonly x: number; readonly height: number },
): string[] {
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
