/** Points by number, one for all that lie within the snapping distance (grid of twice that size, four cells looked at). */
export interface PointStore {
  readonly xy: number[];
  /** Number of the point there, made if it is new. */
  place(x: number, y: number): number;
}

export function pointStore(snap: number): PointStore {
  const xy: number[] = [];
  const cells = new Map<string, number[]>();
  const size = 2 * snap;
  return {
    xy,
    place(x, y) {
      const cx = Math.floor(x / size - 0.5);
      const cy = Math.floor(y / size - 0.5);
      for (let i = cx; i <= cx + 1; i++) {
        for (let j = cy; j <= cy + 1; j++) {
          for (const p of cells.get(`${i},${j}`) ?? []) {
            if (Math.hypot(xy[2 * p] - x, xy[2 * p + 1] - y) <= snap) return p;
          }
        }
      }
      const p = xy.length / 2;
      xy.push(x, y);
      const key = `${Math.floor(x / size)},${Math.floor(y / size)}`;
      const cell = cells.get(key);
      if (cell === undefined) cells.set(key, [p]);
      else cell.push(p);
      return p;
    },
  };
}
