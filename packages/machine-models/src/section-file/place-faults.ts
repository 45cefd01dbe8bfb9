import { type Fault, InputError } from '@gapwright/fem-core';
import { type Document, formatPath, type LengthUnit, type Path, placeOf, sayIn } from '@gapwright/fem-core/text';
import { lengthUnitAt } from './length-unit.js';
import type { SectionFile } from './schema.js';
import type { ShapeFile } from './schema-shapes.js';

/** Faults of the solver, which names what the section names and speaks in metres, as faults of the file in its units. */
export function placeFaults(error: InputError, document: Document, file: SectionFile): InputError {
  return new InputError(
    error.faults.map((fault): Fault => {
      const path = fault.at === undefined ? pathOf(fault, file) : undefined;
      const told = { ...fault, wrong: wrongIn(lengthUnitAt(document, path ?? []), fault) };
      if (path === undefined) return { ...told, at: fault.at ?? document.root.at };
      return { ...told, key: formatPath(path), at: placeOf(document, path) };
    }),
  );
}

const wrongIn = (unit: LengthUnit, { wrong, pieces }: Fault): string =>
  pieces === undefined ? wrong : sayIn(unit, pieces);

/** Where in the file stands what the solver calls by the fault's key; undefined where that cannot be told. */
function pathOf({ code, key }: Fault, file: SectionFile): Path | undefined {
  if (code === 'no-force') return pathOfForce(key, file); // its key is the body's regions
  const [first, ...rest] = key.split('.');
  switch (first) {
    case 'outline':
      return ['outline', ...shapeStep(rest, file.outline)];
    case 'background':
    case 'regions':
    case 'edges':
      if (rest.length === 0) return [first];
      break;
    case 'maxEdge':
      return ['max_edge'];
    case 'sizeAt':
      return [
        'size_at',
        Number(rest[0] ?? 0),
        ...(rest[1] === 'at' ? ['point'] : rest[1] === 'maxEdge' ? ['max_edge'] : []),
      ];
    case 'open':
    case 'matched':
      return ['edges'];
    case 'current':
    case 'currentDensity':
      return pathOfCurrent(rest.join('.'), first, file);
  }
  return pathOfRegion(key, file) ?? pathOfProbe(key, file) ?? pathOfEdge(key, file);
}

const under = (key: string, head: string): readonly string[] | undefined =>
  key === head ? [] : key.startsWith(`${head}.`) ? key.slice(head.length + 1).split('.') : undefined;

/** The entry whose name is the longest that the key goes on with: names may hold dots. */
function findNamed(key: string, entries: readonly { readonly name: string }[], head: string) {
  let found: { readonly index: number; readonly rest: readonly string[]; readonly length: number } | undefined;
  for (const [index, { name }] of entries.entries()) {
    const rest = under(key, head + name);
    if (rest !== undefined && name.length > (found?.length ?? -1)) found = { index, rest, length: name.length };
  }
  return found;
}

function pathOfRegion(key: string, file: SectionFile): Path | undefined {
  const found = findNamed(key, file.regions, 'regions.');
  if (found !== undefined) {
    const { index, rest } = found;
    if (rest[0] === 'maxEdge') return ['regions', index, 'max_edge'];
    if (rest[0] !== 'shape') return ['regions', index];
    return ['regions', index, 'shape', ...shapeStep(rest.slice(1), file.regions[index].shape)];
  }
  const index = file.regions.findIndex(({ name }) => name === key);
  return index < 0 ? undefined : ['regions', index, 'name'];
}

function pathOfCurrent(region: string, kind: 'current' | 'currentDensity', file: SectionFile): Path | undefined {
  const index = file.regions.findIndex(({ name }) => name === region);
  return index < 0 ? undefined : ['regions', index, kind === 'current' ? 'current' : 'current_density'];
}

/** `corners.3` of the solver is `polygon.3` of the file. */
function shapeStep(rest: readonly string[], { polygon, rectangle }: ShapeFile): Path {
  if (rest.length === 0) return [];
  if (polygon === undefined) return [rectangle === undefined ? 'circle' : 'rectangle', ...rest];
  const corner = Number(rest[1]);
  return Number.isInteger(corner) ? ['polygon', corner] : ['polygon'];
}

function pathOfProbe(key: string, file: SectionFile): Path | undefined {
  const found = findNamed(key, file.probes, 'probes.');
  return found === undefined ? undefined : ['probes', found.index];
}

function pathOfForce(key: string, file: SectionFile): Path | undefined {
  const index = file.probes.findIndex(({ force_on }) => force_on !== undefined && [force_on].flat().join(', ') === key);
  return index < 0 ? undefined : ['probes', index, 'force_on'];
}

/** By one side, `edges.left` or `left`, or by a matched pair, `left, right` or `edge 2 + edge 3, edge 6 + edge 5`. */
function pathOfEdge(key: string, file: SectionFile): Path | undefined {
  const wanted = key.replace(/^edges\./, '');
  const index = file.edges.findIndex(({ side }) => {
    if (typeof side === 'string') return side === wanted || side === 'all';
    const pair = side.map((chain) => [chain].flat().join(' + ')).join(', ');
    return pair === wanted || side.flat().includes(wanted);
  });
  return index < 0 ? undefined : ['edges', index, 'side'];
}
