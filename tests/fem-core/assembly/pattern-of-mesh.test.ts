import fc from 'fast-check';
import { expect, test } from 'vitest';
import { pairsOf, patternOfMesh } from '../../../packages/fem-core/src/assembly/pattern-of-mesh.js';

/** Lists of local unknowns, some fixed, some the same within a triangle; every unknown occurs. */
const lists = fc
  .tuple(fc.constantFrom(3, 6), fc.integer({ min: 1, max: 25 }), fc.integer({ min: 1, max: 30 }))
  .chain(([size, n, triangles]) =>
    fc
      .array(fc.integer({ min: -1, max: n - 1 }), { minLength: size * triangles, maxLength: size * triangles })
      .map((unknowns) => ({ size, n, unknowns: Int32Array.from(unknowns) })),
  );

test('the pattern holds every couple within a triangle once, the diagonals, and nothing else; the map finds it', () => {
  fc.assert(
    fc.property(lists, ({ size, n, unknowns }) => {
      const { pattern, scatter } = patternOfMesh(unknowns, size, n);
      const couples = new Set(Array.from({ length: n }, (_, j) => `${j} ${j}`));
      const columnOf = (p: number): number => pattern.start.findIndex((first) => first > p) - 1;
      for (let t = 0; t < unknowns.length / size; t++) {
        for (let i = 0, at = pairsOf(size) * t; i < size; i++) {
          for (let j = 0; j <= i; j++, at++) {
            const [a, b] = [unknowns[size * t + i], unknowns[size * t + j]];
            if (a < 0 || b < 0) {
              expect(scatter[at]).toBe(-1);
              continue;
            }
            couples.add(`${Math.max(a, b)} ${Math.min(a, b)}`);
            expect([pattern.row[scatter[at]], columnOf(scatter[at])]).toEqual([Math.max(a, b), Math.min(a, b)]);
          }
        }
      }
      const found: string[] = [];
      for (let j = 0; j < n; j++) {
        expect(pattern.row[pattern.start[j]]).toBe(j);
        for (let p = pattern.start[j]; p < pattern.start[j + 1]; p++) {
          if (p > pattern.start[j]) expect(pattern.row[p]).toBeGreaterThan(pattern.row[p - 1]);
          found.push(`${pattern.row[p]} ${j}`);
        }
      }
      expect(found).toHaveLength(couples.size);
      expect(new Set(found)).toEqual(couples);
    }),
    { numRuns: 300, seed: 11 },
  );
});
