/** Points by number, one for all that lie within the snapping distance (grid of twice that size, four cells looked at). */
export interface PointStore {
  readonly xy: number[];
  /** Number of the point there, made if it is new. */
  place(x: number, y: number): number;
}

export function pointStore(snap: number): PointStore {
  const xy: number[] = [];
  const size = 2 * snap;
  /** Last point put into a cell, and per point the one before it there; cells may share a place, distance decides. */
  const last = new Map<number, number>();
  const before: number[] = [];
  return {
    xy,
    place(x, y) {
      const cx = Math.floor(x / size - 0.5);
      const cy = Math.floor(y / size - 0.5);
      for (let i = cx; i <= cx + 1; i++) {
        for (let j = cy; j <= cy + 1; j++) {
          for (let p = last.get(placeOf(i, j)) ?? -1; p >= 0; p = before[p]) {
            if (Math.hypot(xy[2 * p] - x, xy[2 * p + 1] - y) <= snap) return p;
          }
        }
      }
      const p = xy.length / 2;
      xy.push(x, y);
      const cell = placeOf(Math.floor(x / size), Math.floor(y / size));
      before.push(last.get(cell) ?? -1);
      last.set(cell, p);
      return p;
    },
  };
}

/** Cells are counted from afar: more than 2^32 of them, so that bits above are folded in. */
const placeOf = (i: number, j: number): number =>
  Math.imul(i ^ Math.floor(i / 0x100000000), 0x9e3779b1) ^ Math.imul(j ^ Math.floor(j / 0x100000000), 0x85ebca6b);
