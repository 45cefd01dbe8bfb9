/** A binary heap of numbered things, the least key first. A thing may be pushed again with a lesser key; it comes out each time. */
export interface Heap {
  readonly items: number[];
  readonly keys: number[];
}

export const newHeap = (): Heap => ({ items: [], keys: [] });

export function pushHeap({ items, keys }: Heap, item: number, key: number): void {
  let at = items.length;
  items.push(item);
  keys.push(key);
  while (at > 0) {
    const parent = (at - 1) >> 1;
    if (keys[parent] <= key) break;
    items[at] = items[parent];
    keys[at] = keys[parent];
    at = parent;
  }
  items[at] = item;
  keys[at] = key;
}

/** Takes the thing of least key out; -1 where there is none. */
export function popHeap({ items, keys }: Heap): number {
  if (items.length === 0) return -1;
  const least = items[0];
  const item = items.pop() as number; // there is one
  const key = keys.pop() as number;
  const count = items.length;
  if (count === 0) return least;
  let at = 0;
  for (let child = 1; child < count; child = 2 * at + 1) {
    if (child + 1 < count && keys[child + 1] < keys[child]) child++;
    if (keys[child] >= key) break;
    items[at] = items[child];
    keys[at] = keys[child];
    at = child;
  }
  items[at] = item;
  keys[at] = key;
  return least;
}
