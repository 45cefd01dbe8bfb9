import * as z from 'zod';
import { field, group, optional, usually, variants } from '../input/fields.js';
import { choice, list, quantity, text, whole } from '../input/readers.js';
import { size } from '../input/schema-common.js';
import { materials } from '../input/schema-materials.js';
import { atMost } from './at-most.js';
import { oneOrList } from './one-or-list.js';
import { magnetised } from './schema-magnetised.js';
import { edgeLength, end, line, point, shape, span } from './schema-shapes.js';

/** Counts that no honest section comes near and that keep the work on any file small. */
export const SECTION_BOUNDS = { regions: 5000, edges: 1000, probes: 1000, sizes: 1000, linePoints: 200_000 } as const;

const ampere = quantity('current', { from: '-1e9 A', to: '1e9 A' }, 'the current of one turn, for example 3 A');
const density = quantity('currentDensity', { from: '-1e9 A/mm2', to: '1e9 A/mm2' }, 'for example 2 A/mm2');

const region = group({
  name: field(text('what the region is called')),
  material: field(text('the name of a material')),
  shape,
  /** Bare; a return side may have them negative. */
  turns: optional(quantity('ratio', { from: '-1e9', to: '1e9' }, 'the number of turns, for example 200')),
  current: optional(ampere),
  current_density: optional(density),
  magnetised: magnetised.optional(),
  max_edge: optional(edgeLength),
});

const tesla = quantity('fluxDensity', { from: '-100 T', to: '100 T' }, 'a component of the field, for example 1 T');

/** One side, several that are bound alike, or two chains of sides that are matched. */
const oneSide = text('the name of a side');
const chain = oneOrList(oneSide, list(oneSide, 1, 1000, 'names of sides that follow each other'));
const sides = list(chain, 1, 1000, 'names of sides, for example [left, right]');
const side = field<string | readonly (string | readonly string[])[]>((value) =>
  Array.isArray(value) ? sides(value) : oneSide(value),
);

const edge = variants('condition', [
  group({ side, condition: z.literal('closed') }),
  group({ side, condition: z.literal('crossing') }),
  group({ side, condition: z.literal('repeating') }),
  group({ side, condition: z.literal('reversing') }),
  group({ side, condition: z.literal('open') }),
  group({
    side,
    condition: z.literal('applied'),
    field: field(list(tesla, 2, 2, 'the field far away, for example [0 T, 1 T]')),
  }),
]);

const regionName = text('the name of a region');
const regionNames = list(regionName, 1, 1000, 'names of regions, for example [plunger, tip]');
const oneOrMore = optional(oneOrList(regionName, regionNames));

const probe = group({
  name: field(text('what the answer is called')),
  point: point.optional(),
  line: line.optional(),
  force_on: oneOrMore,
  /** What torque is taken about; the origin where it is left out. */
  about: point.optional(),
  linkage_of: optional(regionName),
  flux_through: span.optional(),
  mean_over: oneOrMore,
});

const model = group({
  accuracy: usually(
    0.002,
    quantity('ratio', { above: '0 %', to: '50 %' }, 'the wanted relative error, for example 0.2 %'),
  ),
  elements: usually('quadratic', choice(['quadratic', 'linear'])),
  max_triangles: optional(whole(100, 2_000_000, 'the most triangles of a mesh, for example 200000')),
  max_meshes: optional(whole(1, 100, 'the most meshes, each finer than the one before, for example 12')),
});

/** A section file, format gapwright-section/1. */
export const sectionFile = group({
  format: field(choice(['gapwright-section/1'])),
  name: usually('unnamed section', text('what the section is called')),
  /** At right angles to the section; totals are for it. */
  depth: usually(1, size('the size at right angles to the section, for example 40 mm')),
  materials: materials.optional(),
  outline: shape,
  background: field(text('the material of what no region covers, for example air')),
  max_edge: optional(edgeLength),
  regions: atMost(region, SECTION_BOUNDS.regions).prefault([]),
  edges: atMost(edge, SECTION_BOUNDS.edges).prefault([]),
  size_at: atMost(group({ point: end('the point'), max_edge: field(edgeLength) }), SECTION_BOUNDS.sizes).prefault([]),
  probes: atMost(probe, SECTION_BOUNDS.probes).prefault([]),
  model: model.prefault({}),
});

export type SectionFile = z.infer<typeof sectionFile>;
export type RegionFile = SectionFile['regions'][number];
export type EdgeFile = SectionFile['edges'][number];
export type ProbeFile = SectionFile['probes'][number];
