import fc from 'fast-check';
import { expect, test } from 'vitest';
import { boxTree, visitMeetings } from '../../../packages/fem-core/src/geometry/box-tree.js';

const whole = fc.integer({ min: 0, max: 40 });
/** Boxes with corners on a grid, so that many just touch; some are points. */
const boxLists = fc
  .array(fc.tuple(whole, whole, fc.integer({ min: 0, max: 9 }), fc.integer({ min: 0, max: 9 })), { maxLength: 300 })
  .map((list) => Float64Array.from(list.flatMap(([x, y, w, h]) => [x, y, x + w, y + h])));

const meets = (boxes: Float64Array, i: number, j: number): boolean => {
  const [p, q] = [4 * i, 4 * j];
  return (
    boxes[p] <= boxes[q + 2] && boxes[q] <= boxes[p + 2] && boxes[p + 1] <= boxes[q + 3] && boxes[q + 1] <= boxes[p + 3]
  );
};

test('a search finds the boxes that meet the place, each once', () => {
  fc.assert(
    fc.property(boxLists, whole, whole, (boxes, x, y) => {
      const found: number[] = [];
      boxTree(boxes).search(x, y, x + 3, y + 2, (i) => found.push(i));
      const place = Float64Array.from([...boxes, x, y, x + 3, y + 2]);
      const count = boxes.length / 4;
      const wanted = Array.from({ length: count }, (_, i) => i).filter((i) => meets(place, i, count));
      expect(found.sort((a, b) => a - b)).toEqual(wanted);
    }),
    { seed: 71, numRuns: 300 },
  );
});

test('all pairs that meet are visited once, or it is told that there are too many', () => {
  fc.assert(
    fc.property(boxLists, (boxes) => {
      const seen: string[] = [];
      expect(visitMeetings(boxes, Infinity, (i, j) => seen.push(`${i} ${j}`))).toBe(true);
      const wanted: string[] = [];
      for (let i = 0; i < boxes.length / 4; i++)
        for (let j = i + 1; j < boxes.length / 4; j++) if (meets(boxes, i, j)) wanted.push(`${i} ${j}`);
      expect(seen.sort()).toEqual(wanted.sort());
      if (wanted.length > 0) expect(visitMeetings(boxes, wanted.length - 1, () => {})).toBe(false);
    }),
    { seed: 72, numRuns: 100 },
  );
});
