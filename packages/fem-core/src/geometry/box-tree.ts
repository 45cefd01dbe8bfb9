/** Boxes found by place. */
export interface BoxTree {
  /** Calls `visit` with the number of every box that meets [x0, x1] x [y0, y1], borders included; in a fixed order. */
  search(x0: number, y0: number, x1: number, y1: number, visit: (box: number) => void): void;
}

const FAN = 8;

/**
 * R-tree of boxes packed into tiles: sorted into vertical strips, within each by height, eight to a node.
 * Leutenegger, Lopez, Edgington, STR: a simple and efficient algorithm for R-tree packing, ICDE 1997.
 * @param boxes  Float64Array(4n): x0, y0, x1, y1 of each
 */
export function boxTree(boxes: Float64Array): BoxTree {
  const order = tiled(boxes);
  const lowest = new Float64Array(boxes.length);
  order.forEach((box, i) => {
    lowest.set(boxes.subarray(4 * box, 4 * box + 4), 4 * i);
  });
  const levels = [lowest];
  while (levels[levels.length - 1].length > 4 * FAN) levels.push(parents(levels[levels.length - 1]));
  return {
    search(x0, y0, x1, y1, visit) {
      const descend = (depth: number, from: number): void => {
        const level = levels[depth];
        const end = Math.min(4 * (from + FAN), level.length);
        for (let i = 4 * from; i < end; i += 4) {
          if (level[i] > x1 || level[i + 1] > y1 || level[i + 2] < x0 || level[i + 3] < y0) continue;
          if (depth === 0) visit(order[i / 4]);
          else descend(depth - 1, (FAN * i) / 4);
        }
      };
      descend(levels.length - 1, 0);
    },
  };
}

function tiled(boxes: Float64Array): Int32Array {
  const order = Int32Array.from({ length: boxes.length / 4 }, (_, i) => i);
  const by = (k: number) => (i: number, j: number) =>
    boxes[4 * i + k] + boxes[4 * i + k + 2] - boxes[4 * j + k] - boxes[4 * j + k + 2] || i - j;
  order.sort(by(0));
  const strip = FAN * Math.ceil(Math.sqrt(order.length / FAN));
  for (let from = 0; from < order.length; from += strip) order.subarray(from, from + strip).sort(by(1));
  return order;
}

function parents(level: Float64Array): Float64Array<ArrayBuffer> {
  const above = new Float64Array(4 * Math.ceil(level.length / (4 * FAN)));
  for (let p = 0; p < above.length; p += 4) {
    const box = [Infinity, Infinity, -Infinity, -Infinity];
    for (let i = p * FAN; i < Math.min((p + 4) * FAN, level.length); i += 4) {
      box[0] = Math.min(box[0], level[i]);
      box[1] = Math.min(box[1], level[i + 1]);
      box[2] = Math.max(box[2], level[i + 2]);
      box[3] = Math.max(box[3], level[i + 3]);
    }
    above.set(box, p);
  }
  return above;
}

/**
 * Calls `visit` with every pair of boxes that meet, i < j, in order of i.
 * @returns false, with the rest left out, where there are more pairs than `most`
 */
export function visitMeetings(boxes: Float64Array, most: number, visit: (i: number, j: number) => void): boolean {
  const tree = boxTree(boxes);
  let count = 0;
  for (let i = 0; i < boxes.length / 4 && count <= most; i++) {
    const found: number[] = [];
    const k = 4 * i;
    tree.search(boxes[k], boxes[k + 1], boxes[k + 2], boxes[k + 3], (j) => {
      if (j > i) found.push(j);
    });
    count += found.length;
    for (const j of found) visit(i, j);
  }
  return count <= most;
}
