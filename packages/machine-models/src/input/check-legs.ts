import type { Opening, Winding } from '../machine.js';
import { openingSide } from '../winding/leg-cut.js';
import { atMostMillimetres, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import { legRoom, overlappedRoom, type Surroundings, widthAt } from './resolve-winding.js';
import type { WindingFile } from './schema-winding.js';

/** Whether every leg has a size and a place of its own over the magnets; tells what is wrong where it has not. */
export function checkLegs(file: WindingFile, winding: Winding, around: Surroundings, report: Report): boolean {
  const ends = winding.layout === 'concentrated' ? winding.opening : winding.legs;
  if (!checkEnds(ends, around, report)) return false;
  if (winding.layout === 'overlapped') {
    const { innerRadius } = winding.legs;
    const most = { width: overlappedRoom(winding, innerRadius, around), radius: innerRadius };
    return checkRoom(winding, most, report) && checkReach(winding, around, report);
  }
  return (
    file.layout === 'concentrated' &&
    checkFit(file, report) &&
    checkOpening(winding, report) &&
    checkRoom(winding, legRoom(winding, winding.opening, around), report) &&
    checkReach(winding, around, report)
  );
}

function checkEnds(
  { innerRadius, outerRadius }: { readonly innerRadius: number; readonly outerRadius: number },
  { inner, outer, gap }: Surroundings,
  report: Report,
): boolean {
  const path = ['winding', 'opening'];
  if (innerRadius >= outerRadius) {
    const wrong = `must be more than the inner_radius of ${millimetres(innerRadius)}, got ${millimetres(outerRadius)}`;
    report.fault([...path, 'outer_radius'], 'out-of-range', wrong, 'give the radius of the outer end');
    return false;
  }
  if (inner <= 0) return false; // magnets that reach the shaft are told already
  if (innerRadius >= outer) {
    const wrong = `the legs begin at ${millimetres(innerRadius)}, but the magnets end at ${millimetres(outer)}`;
    report.fault([...path, 'inner_radius'], 'legs-miss-magnets', wrong, `give about ${millimetres(inner)}`);
    return false;
  }
  if (outerRadius <= inner) {
    const wrong = `the legs end at ${millimetres(outerRadius)}, but the magnets begin at ${millimetres(inner)}`;
    report.fault([...path, 'outer_radius'], 'legs-miss-magnets', wrong, `give about ${millimetres(outer)}`);
    return false;
  }
  // Beyond the magnets' ends the field falls off over about the length of the gap.
  if (innerRadius < inner - gap) {
    const text = `the legs begin ${millimetres(inner - innerRadius)} inside the magnets, where there is little field`;
    report.warn([...path, 'inner_radius'], text);
  }
  if (outerRadius > outer + gap) {
    const text = `the legs end ${millimetres(outerRadius - outer)} outside the magnets, where there is little field`;
    report.warn([...path, 'outer_radius'], text);
  }
  return innerRadius < outerRadius && inner > 0; // false, too, where one of them is not known
}

/** `fit` and `fill` share out the same room: one of them has to say how much. */
function checkFit({ opening, leg_width }: WindingFile & { readonly layout: 'concentrated' }, report: Report): boolean {
  const widths = [opening.inner_width, opening.outer_width];
  const fits = widths.filter((width) => width === 'fit').length;
  if (fits === 1 && !widths.some(Number.isNaN)) {
    const key = opening.inner_width === 'fit' ? 'outer_width' : 'inner_width';
    const remedy = 'give both widths, or say fit for both';
    report.fault(['winding', 'opening', key], 'half-fit', 'is given while the other width is to fit', remedy);
    return false;
  }
  if (fits === 2 && leg_width === 'fill') {
    const wrong = 'legs that fill the room and an opening that fits between them leave each other open';
    report.fault(['winding', 'leg_width'], 'fit-and-fill', wrong, 'give the leg_width or the widths of the opening');
    return false;
  }
  return true;
}

function checkOpening(
  { opening, coils, legWidth }: Winding & { readonly layout: 'concentrated' },
  report: Report,
): boolean {
  if (opening.innerWidth < 0 || opening.outerWidth < 0) {
    // only what is worked out for `fit` can be
    const wrong = `legs of ${millimetres(legWidth)} leave no opening between them at ${millimetres(opening.innerRadius)}`;
    report.fault(['winding', 'leg_width'], 'coils-overlap', wrong, `give narrower legs, or fewer coils than ${coils}`);
    return false;
  }
  const tooWide = (['inner', 'outer'] as const).filter((end) => isTooWide(opening, end, coils));
  for (const end of tooWide) {
    const [radius, width] = [opening[`${end}Radius`], opening[`${end}Width`]];
    const wrong =
      `must be less than a coil's share of the circle, ${millimetres(sectorWidth(radius, coils))} at ` +
      `${millimetres(radius)}, got ${millimetres(width)}`;
    report.fault(['winding', 'opening', `${end}_width`], 'coils-overlap', wrong, 'leave room for a leg on each side');
  }
  return tooWide.length === 0;
}

function isTooWide(opening: Opening, end: 'inner' | 'outer', coils: number): boolean {
  return opening[`${end}Width`] >= sectorWidth(opening[`${end}Radius`], coils) * (1 - HAIR);
}

/** Straight across the coil's axis from border to border; three coils or more. */
function sectorWidth(radius: number, coils: number): number {
  return 2 * radius * Math.tan(Math.PI / Math.max(coils, 3));
}

function checkRoom(
  { legWidth, legShape, layout }: Winding,
  most: { readonly width: number; readonly radius: number },
  report: Report,
): boolean {
  if (legWidth > most.width * (1 + HAIR)) {
    const where = legShape === 'parallel' ? '' : ' (told for the mean radius)';
    const wrong =
      `neighbouring legs overlap: ${millimetres(legWidth)} wide, but at ${millimetres(most.radius)} from the shaft there ` +
      `is room for ${millimetres(most.width)}${where}`;
    const narrower = layout === 'concentrated' ? ', or a narrower opening' : '';
    report.fault(
      ['winding', 'leg_width'],
      'coils-overlap',
      wrong,
      `give at most ${atMostMillimetres(most.width)}${narrower}`,
    );
  }
  return legWidth <= most.width * (1 + HAIR) && legWidth > 0;
}

/** The slices prolong the legs over the whole length of the magnets: every circle there has to cross both their sides. */
function checkReach(winding: Winding, around: Surroundings, report: Report): boolean {
  const path = ['winding', 'opening', 'inner_radius'];
  const { legWidth, legShape } = winding;
  for (const radius of [around.inner, around.outer]) {
    const width = legWidth * widthAt(legShape, radius, around);
    const { distance } = winding.layout === 'concentrated' ? openingSide(winding.opening) : { distance: -width / 2 };
    if (Math.abs(distance) < radius && Math.abs(distance + width) < radius) continue;
    const wrong = `the legs, prolonged to the magnets' end at ${millimetres(radius)}, pass it by`;
    report.fault(
      path,
      'legs-miss-magnets',
      wrong,
      'let the legs begin nearer to the magnets, or run more along a radius',
    );
    return false;
  }
  return true;
}
