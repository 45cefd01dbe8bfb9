import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { Curve } from './curve.js';
import { chordCrossings } from './curve.js';
import type { Point, Section, Shape } from './section.js';
import { boundsOf, offsetBetween, SNAP, sidesOf } from './shapes.js';

/** Gathers every fault of the drawing. */
export function checkShapes(section: Section): void {
  const faults: Fault[] = [];
  const tell = (code: string, key: string, wrong: string, remedy: string): void => {
    faults.push({ code, key, wrong, remedy });
  };
  const shapes: readonly (readonly [string, Shape])[] = [
    ['outline', section.outline],
    ...section.regions.map((region) => [region.name, region.shape] as const),
  ];
  for (const [name, shape] of shapes) {
    const box = boundsOf(shape);
    if (![box.x0, box.y0, box.x1, box.y1].every(Number.isFinite)) {
      tell('not-finite', name, 'has a coordinate that is not a finite number', 'give every coordinate in metres');
    } else if (!(box.x1 > box.x0 && box.y1 > box.y0)) {
      tell('no-area', name, 'has no area', 'give corners that span a width and a height');
    } else if (shape.kind === 'polygon' && shape.corners.length < 3) {
      tell('too-few-corners', name, `has ${shape.corners.length} corners`, 'a polygon needs three or more');
    } else if (shape.kind === 'polygon') {
      const crossing = selfCrossing(shape.corners);
      if (crossing !== undefined) {
        tell(
          'outline-crosses-itself',
          name,
          `crosses itself near (${crossing.join(', ')}) m`,
          'order the corners round the shape',
        );
      }
    }
  }
  const outer = boundsOf(section.outline);
  for (const region of section.regions) {
    const box = boundsOf(region.shape);
    const apart = box.x0 >= outer.x1 || box.x1 <= outer.x0 || box.y0 >= outer.y1 || box.y1 <= outer.y0;
    if (apart) tell('outside', region.name, 'lies outside the outline', 'move it inside or enlarge the outline');
  }
  const names = [section.background, ...section.regions.map((region) => region.name)];
  const twice = names.find((name, i) => names.indexOf(name) !== i);
  if (twice !== undefined) tell('name-twice', twice, 'names two regions', 'give each region a name of its own');
  const sizes = [[section.background, section.maxEdge] as const].concat(
    section.regions.map((r) => [r.name, r.maxEdge]),
  );
  for (const [name, maxEdge] of sizes) {
    if (maxEdge !== undefined && !(maxEdge > 0)) {
      tell('bad-edge-length', name, `maxEdge must be more than 0 m, got ${maxEdge}`, 'leave it out for no limit');
    }
  }
  const paired = (section.matched ?? []).flat();
  const again = paired.find((side, i) => paired.indexOf(side) !== i);
  if (again !== undefined) tell('matched-twice', again, 'is matched twice', 'match a side with one other side');
  for (const [from, to] of section.matched ?? []) {
    if (offsetBetween(section, from, to) === undefined) {
      tell(
        'not-matching',
        `${from}, ${to}`,
        'are not sides of equal length and direction',
        `sides here are: ${sidesOf(section.outline).join(', ')}`,
      );
    }
  }
  if (faults.length > 0) throw new InputError(faults);
}

/** A point where a polygon's border meets itself other than at neighbouring corners. */
export function selfCrossing(corners: readonly Point[]): Point | undefined {
  const n = corners.length;
  const box = boundsOf({ kind: 'polygon', corners });
  const snap = SNAP * Math.max(box.x1 - box.x0, box.y1 - box.y0);
  const line: Curve = { kind: 'line' };
  for (let i = 0; i < n; i++) {
    const p = { from: corners[i], to: corners[(i + 1) % n] };
    for (let j = i + 2; j < n; j++) {
      if (i === 0 && j === n - 1) continue;
      const hit = chordCrossings(p, line, { from: corners[j], to: corners[(j + 1) % n] }, line, snap)[0];
      if (hit !== undefined) return hit;
    }
  }
  return undefined;
}
