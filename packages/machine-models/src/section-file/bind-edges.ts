import type { EdgeCondition, Section, Shape } from '@gapwright/fem-core';
import { sidesOf } from '@gapwright/fem-core/mesh';
import { findNearest, listWords, type Path, showText } from '@gapwright/fem-core/text';
import type { Report } from '../input/report.js';
import { bareRecord } from './bare-record.js';
import type { EdgeFile } from './schema.js';

/** What binds the outline. */
export interface BoundEdges {
  readonly edges: Readonly<Record<string, EdgeCondition>>;
  readonly matched: NonNullable<Section['matched']>;
  readonly open: boolean;
}

/** Sides told in a remedy at most. */
const MOST_NAMED = 8;
/** Names without a side for which a similar one is looked for. */
const MOST_SEARCHED = 50;

/** Conditions by side, pairs that must be matched, and whether the section lies in unbounded space. */
export function bindEdges(entries: readonly EdgeFile[], outline: Shape, report: Report): BoundEdges {
  const sides = sidesOf(outline);
  const known = new Set(sides);
  const boundBy = new Map<string, number>();
  const conditions: (readonly [string, EdgeCondition])[] = [];
  const matched: (readonly [string | readonly string[], string | readonly string[]])[] = [];
  let open = false;
  let searched = 0;

  const tellUnknown = (name: string, path: Path): void => {
    const nearest = searched++ < MOST_SEARCHED ? findNearest(name, ['all', ...sides.slice(0, 1000)]) : undefined;
    const some = sides.length > MOST_NAMED ? [...sides.slice(0, 2), '...', sides[sides.length - 1]] : sides;
    const remedy =
      nearest === undefined ? `sides here are: ${some.join(', ')}; or all of them: all` : `did you mean ${nearest}?`;
    report.fault(path, 'unknown-side', `${showText(name)} is no side of the outline`, remedy);
  };
  const bind = (name: string, condition: EdgeCondition, entry: number, path: Path): void => {
    if (name === '') return; // told already
    const before = boundBy.get(name);
    if (!known.has(name)) tellUnknown(name, path);
    else if (before !== undefined) {
      const wrong = `${name} has a condition already, by edges.${before}`;
      report.fault(path, 'side-twice', wrong, 'give each side one condition');
    } else {
      boundBy.set(name, entry);
      conditions.push([name, condition]);
    }
  };
  const bindPair = (given: EdgeFile['side'], condition: EdgeCondition, entry: number, path: Path): void => {
    if (given === '') return; // told already
    if (typeof given === 'string' || given.length !== 2) {
      const wrong = `${condition.kind} binds two sides to each other, got ${typeof given === 'string' ? showText(given) : given.length}`;
      const remedy = 'give two sides that lie opposite each other, for example [left, right], or two lists of sides';
      report.fault(path, 'no-pair', wrong, remedy);
      return;
    }
    given.forEach((chain, k) => {
      if (typeof chain === 'string') bind(chain, condition, entry, [...path, k]);
      else for (const [j, name] of chain.entries()) bind(name, condition, entry, [...path, k, j]);
    });
    matched.push([given[0], given[1]]);
  };

  for (const [i, edge] of entries.entries()) {
    const path = ['edges', i, 'side'];
    if (edge.condition === 'open') {
      const alone = entries.length === 1;
      if (edge.side !== 'all' && edge.side !== '') {
        report.fault(path, 'open-side', 'open space lies round the whole outline, not at some sides', 'give side: all');
      } else if (!alone) {
        const wrong = 'open space lies round the whole outline, but other sides have conditions too';
        report.fault(path, 'side-twice', wrong, 'leave out the other entries of edges');
      }
      open = true;
      continue;
    }
    const condition = conditionOf(edge);
    if (edge.condition === 'repeating' || edge.condition === 'reversing') bindPair(edge.side, condition, i, path);
    else if (edge.side === 'all') for (const name of sides) bind(name, condition, i, path);
    else if (typeof edge.side === 'string') bind(edge.side, condition, i, path);
    else {
      for (const [k, name] of edge.side.entries()) {
        if (typeof name === 'string') bind(name, condition, i, [...path, k]);
        else {
          const remedy = `${listWords(['repeating', 'reversing'])} alone take lists of lists`;
          report.fault([...path, k], 'not-text', 'must be the name of a side, got a list', remedy);
        }
      }
    }
  }
  return { edges: bareRecord(conditions), matched, open };
}

function conditionOf(edge: Exclude<EdgeFile, { readonly condition: 'open' }>): EdgeCondition {
  if (edge.condition !== 'applied') return { kind: edge.condition };
  const [bx = Number.NaN, by = Number.NaN] = edge.field;
  return { kind: 'applied', field: [bx, by] };
}
