import type { Fault, Piece } from '../base/fault.js';
import { InputError, tellWrong } from '../base/fault.js';
import { visitMeetings } from './box-tree.js';
import { checkForm } from './check-form.js';
import type { Curve } from './curve.js';
import { chordCrossings, liesOn } from './curve.js';
import { MAX_MEETINGS, MAX_OFFSET, MAX_PIECES, MAX_SIZE, MIN_SIZE, SNAP } from './limits.js';
import { fits, matchSides } from './matched-sides.js';
import type { Point, Section, Shape } from './section.js';
import type { Bounds } from './shapes.js';
import { boundsOf, centreOf, cornersOf, sidesOf, sizeOf } from './shapes.js';
import { BEYOND_REGION, OUTSIDE_REGION } from './unbounded.js';

/** Border pieces a circle is drawn with; refinement halves them as needed, always on the circle. */
export const CHORDS = 16;

type Wrong = string | readonly Piece[];
type Tell = (code: string, key: string, wrong: Wrong, remedy: string) => void;

/**
 * Gathers every fault of a section that is seen before its lines are drawn over each other.
 * @throws InputError
 */
export function checkShapes(section: Section): void {
  checkForm(section);
  const faults: Fault[] = [];
  const tell: Tell = (code, key, wrong, remedy) => {
    faults.push({ code, key, ...tellWrong(wrong), remedy });
  };
  const shapes: readonly (readonly [key: string, shape: Shape])[] = [
    ['outline', section.outline],
    ...section.regions.map((region) => [`regions.${region.name}.shape`, region.shape] as const),
  ];
  checkCount(shapes, tell);
  if (faults.length === 0) {
    for (const [key, shape] of shapes) checkShape(key, shape, tell);
    checkPlaces(shapes, tell);
    checkNames(section, tell);
    checkMatched(section, tell);
  }
  if (faults.length > 0) throw new InputError(faults);
}

function checkCount(shapes: readonly (readonly [string, Shape])[], tell: Tell): void {
  let all = 0;
  for (const [key, shape] of shapes) {
    const count = shape.kind === 'polygon' ? shape.corners.length : shape.kind === 'circle' ? CHORDS : 4;
    all += count;
    if (count <= MAX_PIECES) continue;
    tell('too-many-corners', key, `has ${count} corners, more than the ${MAX_PIECES} that are drawn`, 'leave some out');
    return;
  }
  if (all <= MAX_PIECES) return;
  const wrong = `have ${all} border pieces (a side of a polygon, a sixteenth of a circle), more than ${MAX_PIECES}`;
  tell('too-many-corners', 'regions', wrong, 'leave some out');
}

function checkShape(key: string, shape: Shape, tell: Tell): void {
  const box = boundsOf(shape);
  if (shape.kind === 'polygon' && cornersOf(shape).length < 3) {
    tell('too-few-corners', key, `has ${cornersOf(shape).length} corners`, 'a polygon needs three or more');
  } else if (!(box.x1 > box.x0 && box.y1 > box.y0)) {
    tell('no-area', key, 'has no area', 'give corners that span a width and a height');
  } else if (shape.kind === 'polygon') {
    checkPolygon(key, cornersOf(shape), tell);
  }
}

function checkPolygon(key: string, corners: readonly Point[], tell: Tell): void {
  const count = corners.length;
  const snap = SNAP * sizeOf(boundsOf({ kind: 'polygon', corners }));
  const twin = corners.findIndex((p, i) => apart(p, corners[(i + 1) % count]) <= snap);
  if (twin >= 0) {
    const wrong = [
      `corners ${twin + 1} and ${((twin + 1) % count) + 1} are the same point, `,
      { metres: corners[twin] },
    ];
    tell('coincident-corners', key, wrong, 'leave one of them out');
  } else if (isStraight(corners, snap)) {
    tell('no-area', key, 'has no area: its corners lie on one line', 'give corners that span a width and a height');
  } else {
    const crossing = selfCrossing(corners, snap);
    if (crossing === undefined) return;
    tell('outline-crosses-itself', key, crossing, 'order the corners round the shape');
  }
}

const apart = (p: Point, q: Point): number => Math.hypot(p[0] - q[0], p[1] - q[1]);
const LINE: Curve = { kind: 'line' };

function isStraight(corners: readonly Point[], snap: number): boolean {
  const from = corners[0];
  const to = corners.reduce((far, p) => (apart(from, p) > apart(from, far) ? p : far));
  return corners.every((p) => liesOn({ from, to }, LINE, p, snap));
}

/** Where a polygon's border meets itself other than at neighbouring corners, or runs back on itself; told in words. */
function selfCrossing(corners: readonly Point[], snap: number): Wrong | undefined {
  const count = corners.length;
  const chords = corners.map((from, i) => ({ from, to: corners[(i + 1) % count] }));
  for (let i = 0; i < count; i++) {
    const [before, after] = [chords[i], chords[(i + 1) % count]];
    if (liesOn(before, LINE, after.to, snap) || liesOn(after, LINE, before.from, snap))
      return [`runs back on itself at corner ${((i + 1) % count) + 1}, `, { metres: after.from }];
  }
  const boxes = new Float64Array(4 * count);
  chords.forEach(({ from, to }, i) => {
    boxes[4 * i] = Math.min(from[0], to[0]) - snap;
    boxes[4 * i + 1] = Math.min(from[1], to[1]) - snap;
    boxes[4 * i + 2] = Math.max(from[0], to[0]) + snap;
    boxes[4 * i + 3] = Math.max(from[1], to[1]) + snap;
  });
  let found: Wrong | undefined;
  const all = visitMeetings(boxes, MAX_MEETINGS, (i, j) => {
    if (found !== undefined || j === i + 1 || (i === 0 && j === count - 1)) return;
    const hit = chordCrossings(chords[i], LINE, chords[j], LINE, snap)[0];
    if (hit !== undefined)
      found = ['crosses or touches itself near ', { metres: hit }, `, sides ${i + 1} and ${j + 1}`];
  });
  return found ?? (all ? undefined : `has sides of which more than ${MAX_MEETINGS} pairs may cross`);
}

function checkPlaces(shapes: readonly (readonly [string, Shape])[], tell: Tell): void {
  const outer = boundsOf(shapes[0][1]);
  const size = sizeOf(outer);
  const centre = centreOf(outer);
  if (!(size >= MIN_SIZE && size <= MAX_SIZE)) {
    const [least, most] = [{ metres: MIN_SIZE }, { metres: MAX_SIZE }];
    const wrong = ['is ', { metres: size }, ' in size, not between ', least, ' and ', most];
    if (size > 0) tell('out-of-range', 'outline', wrong, 'check the units of its lengths');
    return;
  }
  if (!(Math.hypot(...centre) <= MAX_OFFSET * size)) {
    const wrong = `lies more than ${MAX_OFFSET} of its sizes from the origin`;
    tell('out-of-range', 'outline', wrong, 'draw the section near the origin');
  }
  for (const [key, shape] of shapes.slice(1)) {
    const box = boundsOf(shape);
    if (isApart(box, outer))
      tell('outside-outline', key, 'lies outside the outline', 'move it inside or enlarge the outline');
    else if (!(reachOf(box, centre) <= MAX_OFFSET * size)) {
      tell(
        'out-of-range',
        key,
        `reaches more than ${MAX_OFFSET} sizes of the outline from it`,
        'cut it at the outline',
      );
    }
  }
}

const isApart = (p: Bounds, q: Bounds): boolean => p.x0 >= q.x1 || p.x1 <= q.x0 || p.y0 >= q.y1 || p.y1 <= q.y0;
const reachOf = (box: Bounds, [x, y]: Point): number => Math.max(box.x1 - x, x - box.x0, box.y1 - y, y - box.y0);

function checkNames(section: Section, tell: Tell): void {
  const known = new Set(section.open === true ? [OUTSIDE_REGION, BEYOND_REGION] : []);
  for (const name of [section.background, ...section.regions.map((region) => region.name)]) {
    if (known.has(name)) tell('name-twice', name, 'names two regions', 'give each region a name of its own');
    known.add(name);
  }
}

function checkMatched(section: Section, tell: Tell): void {
  const pairs = section.matched ?? [];
  const known = new Set<string>();
  for (const side of pairs.flat(2)) {
    if (known.has(side)) tell('matched-twice', side, 'is matched twice', 'match a side with one other side');
    known.add(side);
  }
  if (section.open === true && pairs.length > 0) {
    tell('not-matching', 'matched', 'an open section has no sides to match', 'leave out matched, or open');
    return;
  }
  const names = sidesOf(section.outline);
  const some = names.length > 12 ? `${names.slice(0, 3).join(', ')} ... ${names[names.length - 1]}` : names.join(', ');
  for (const pair of pairs) {
    const wrong = matchSides(section.outline, pair);
    if (fits(wrong)) continue;
    tell('not-matching', pair.map((chain) => [chain].flat().join(' + ')).join(', '), wrong, `sides here are: ${some}`);
  }
}
