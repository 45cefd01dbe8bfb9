import type { Triangulation } from './triangulation.js';

/**
 * Triangles waiting for treatment, first come first served, as a ring that doubles when full. An entry whose slot has been
 * rewritten since lapses by its stamp, so that nothing need ever be taken out of the middle.
 */
export interface Queue {
  /** Int32Array, a power of two long: slots and, in `stamps`, their stamps when they were judged. */
  slots: Int32Array;
  stamps: Int32Array;
  head: number;
  count: number;
}

export const newQueue = (): Queue => ({
  slots: new Int32Array(16),
  stamps: new Int32Array(16),
  head: 0,
  count: 0,
});

export function enqueue(queue: Queue, slot: number, stamp: number): void {
  if (queue.count === queue.slots.length) grow(queue);
  const at = (queue.head + queue.count++) & (queue.slots.length - 1);
  queue.slots[at] = slot;
  queue.stamps[at] = stamp;
}

/** The first triangle that still is what it was when it was queued, -1 when none is left. */
export function dequeue(queue: Queue, tri: Triangulation): number {
  const { slots, stamps } = queue;
  const { stamp } = tri;
  const wrap = slots.length - 1;
  while (queue.count > 0) {
    const at = queue.head;
    queue.head = (at + 1) & wrap;
    queue.count--;
    if (stamp[slots[at]] === stamps[at]) return slots[at];
  }
  return -1;
}

function grow(queue: Queue): void {
  const { slots, stamps, head } = queue;
  const turned = (ring: Int32Array): Int32Array => {
    const wider = new Int32Array(2 * ring.length);
    wider.set(ring.subarray(head));
    wider.set(ring.subarray(0, head), ring.length - head);
    return wider;
  };
  queue.slots = turned(slots);
  queue.stamps = turned(stamps);
  queue.head = 0;
}
