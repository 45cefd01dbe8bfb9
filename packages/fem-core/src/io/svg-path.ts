/** A line on the whole-number grid of a drawing: x and y alternating. */
export interface GridLine {
  readonly xy: readonly number[];
  readonly closed: boolean;
}

/**
 * Path data of the lines with relative whole-number steps, the shortest text SVG has for them. Points nearer than
 * `tolerance` (grid units) to the line through their neighbours are left out.
 */
export function pathData(lines: readonly GridLine[], tolerance: number): string {
  return lines.map((line) => onePath(line, tolerance)).join('');
}

function onePath({ xy, closed }: GridLine, tolerance: number): string {
  const kept = closed ? thinRing(xy, tolerance) : thinLine(xy, tolerance);
  // A ring thinner than the tolerance, or a line that shrank to a dot, has nothing to show.
  if (kept.length < (closed ? 6 : 4)) return '';
  let text = `M${kept[0]}${separated(kept[1])}l`;
  let first = true;
  for (let k = 2; k < kept.length; k += 2) {
    const dx = kept[k] - kept[k - 2];
    const dy = kept[k + 1] - kept[k - 1];
    if (dx === 0 && dy === 0) continue;
    text += `${first ? dx : separated(dx)}${separated(dy)}`;
    first = false;
  }
  return first ? '' : `${text}${closed ? 'z' : ''}`;
}

/** A minus sign parts numbers by itself. */
const separated = (value: number): string => (value < 0 ? `${value}` : ` ${value}`);

/** A ring has no ends to hold on to: it is thinned as two lines between its first point and the one farthest from it. */
function thinRing(xy: readonly number[], tolerance: number): number[] {
  let far = 0;
  let farthest = 0;
  for (let k = 2; k < xy.length; k += 2) {
    const distance = Math.hypot(xy[k] - xy[0], xy[k + 1] - xy[1]);
    if (distance > farthest) [far, farthest] = [k, distance];
  }
  const there = thinLine(xy.slice(0, far + 2), tolerance);
  const back = thinLine([...xy.slice(far), xy[0], xy[1]], tolerance);
  return [...there, ...back.slice(2, -2)];
}

/** Ramer 1972, Douglas and Peucker 1973: keeps the point farthest from a chord while it is out of tolerance. */
function thinLine(xy: readonly number[], tolerance: number): number[] {
  const last = xy.length - 2;
  const keep = new Set([0, last]);
  const open: [number, number][] = [[0, last]];
  for (let span = open.pop(); span !== undefined; span = open.pop()) {
    const [a, b] = span;
    let worst = a;
    let most = tolerance;
    for (let k = a + 2; k < b; k += 2) {
      const distance = distanceToSegment(xy[k], xy[k + 1], xy[a], xy[a + 1], xy[b], xy[b + 1]);
      if (distance > most) [worst, most] = [k, distance];
    }
    if (worst === a) continue;
    keep.add(worst);
    open.push([a, worst], [worst, b]);
  }
  return [...keep].sort((a, b) => a - b).flatMap((k) => [xy[k], xy[k + 1]]);
}

/** Distance of (x, y) from the segment between (x0, y0) and (x1, y1), in their unit. */
export function distanceToSegment(x: number, y: number, x0: number, y0: number, x1: number, y1: number): number {
  const dx = x1 - x0;
  const dy = y1 - y0;
  const squared = dx * dx + dy * dy;
  const share = squared === 0 ? 0 : Math.max(0, Math.min(1, ((x - x0) * dx + (y - y0) * dy) / squared));
  return Math.hypot(x - x0 - share * dx, y - y0 - share * dy);
}
