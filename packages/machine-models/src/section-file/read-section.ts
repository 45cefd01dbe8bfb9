import { InputError, type Place, type Probe, type Region, type Section, type Setup } from '@gapwright/fem-core';
import { applySettings, placeOf, plainValue, readDocument, showText } from '@gapwright/fem-core/text';
import { gatherMaterials } from '../input/check-materials.js';
import { MACHINE_FORMAT, refuseOtherFormat } from '../input/file-format.js';
import type { ReadOptions } from '../input/read-machine.js';
import { readSchema } from '../input/read-schema.js';
import { type OpenReport, openReport } from '../input/report.js';
import type { Warning } from '../machine.js';
import { bareRecord } from './bare-record.js';
import { bindEdges } from './bind-edges.js';
import { buildProbes } from './build-probes.js';
import { buildShape } from './build-shape.js';
import { fillBackground, fillRegions } from './fill-regions.js';
import { placeFaults } from './place-faults.js';
import { type RegionFile, type SectionFile, sectionFile } from './schema.js';

/** A section with all that the solver wants, SI units. */
export interface SectionProblem {
  readonly name: string;
  /** At right angles to the section, m. */
  readonly depth: number;
  readonly section: Section;
  readonly setup: Setup;
  readonly probes: readonly Probe[];
  /** Wanted relative error. */
  readonly accuracy: number;
  readonly elements: 'quadratic' | 'linear';
  /** The solver's own limits where absent. */
  readonly maxTriangles?: number;
  readonly maxMeshes?: number;
  /** Name of the material by that of the region, the background last. */
  readonly materials: readonly (readonly [region: string, material: string])[];
}

export interface SectionReadResult {
  readonly problem: SectionProblem;
  readonly warnings: readonly Warning[];
  /** The same faults, where they stand in the file: the solver knows regions and sides by their names only. */
  readonly place: (error: InputError) => InputError;
  /** Where the file has what a warning is about; undefined for one that is about no key. */
  readonly locate: (warning: Warning) => Place | undefined;
}

/**
 * Reads a section file (format gapwright-section/1; YAML 1.2, so JSON too). Everything wrong with its text is gathered
 * before anything is thrown, as `readMachine` does; what the drawing alone shows is found by `checkSection` or the solver,
 * whose faults `place` puts into the file.
 *
 * @throws InputError with every fault and its place
 */
export function readSection(text: string, options: ReadOptions): SectionReadResult {
  const document = applySettings(readDocument(text, options.file), options.settings ?? []);
  const report = openReport(document);
  const raw = plainValue(document.root);
  refuseOtherFormat(raw, MACHINE_FORMAT, ['says that this is a machine file', 'use gapwright solve'], report);
  const { value: file, problems } = readSchema(sectionFile, raw);
  for (const found of problems) report.add(found);
  const problem = file && judge(file, options, report);
  const faults = report.faults();
  if (faults.length > 0 || file === undefined || problem === undefined) throw new InputError(faults);
  return {
    problem,
    warnings: report.warnings(),
    place: (error) => placeFaults(error, document, file),
    locate: ({ key }) => (key === '' ? undefined : placeOf(document, key.split('.'))),
  };
}

/** How the values go together; a section where nothing at all is wrong. */
function judge(file: SectionFile, options: ReadOptions, report: OpenReport): SectionProblem | undefined {
  const outline = buildShape(file.outline, ['outline'], report);
  const shapes = file.regions.map((region, i) => buildShape(region.shape, ['regions', i, 'shape'], report));
  const materials = gatherMaterials(file.materials, options.readBeside, report);
  const filling = fillRegions(file.regions, shapes, materials, report);
  const behind = fillBackground(file.background, materials, report);
  refuseTwins(file.regions, report);
  checkCurrents(file.regions, report);
  const background = freeName(file.background, file.regions);
  const { edges, matched, open } = bindEdges(file.edges, outline, report);
  const around = { regions: file.regions, background, outline: open ? undefined : outline };
  const probes = buildProbes(file.probes, around, report);
  if (report.faults().length > 0) return undefined;
  const regions = file.regions.map(
    ({ name, max_edge }, i): Region => ({
      name,
      shape: shapes[i],
      ...(max_edge === undefined ? {} : { maxEdge: max_edge }),
    }),
  );
  const { accuracy, elements, max_triangles, max_meshes } = file.model;
  return {
    name: file.name,
    depth: file.depth,
    section: {
      outline,
      background,
      ...(file.max_edge === undefined ? {} : { maxEdge: file.max_edge }),
      regions,
      ...(matched.length === 0 ? {} : { matched }),
      ...(file.size_at.length === 0
        ? {}
        : { sizeAt: file.size_at.map(({ point, max_edge }) => ({ at: point, maxEdge: max_edge })) }),
      ...(open ? { open } : {}),
    },
    setup: {
      materials: bareRecord([...regions.map(({ name }, i) => [name, filling[i]()] as const), [background, behind()]]),
      ...currentsOf(file.regions),
      edges,
    },
    probes,
    accuracy,
    elements,
    ...(max_triangles === undefined ? {} : { maxTriangles: max_triangles }),
    ...(max_meshes === undefined ? {} : { maxMeshes: max_meshes }),
    materials: [...file.regions.map(({ name, material }) => [name, material] as const), [background, file.background]],
  };
}

/** The background goes by the name of its material, unless a region does. */
function freeName(material: string, regions: readonly RegionFile[]): string {
  const taken = new Set(regions.map(({ name }) => name));
  for (let k = 0; ; k++) {
    const name = k === 0 ? material : k === 1 ? 'background' : `background ${k}`;
    if (!taken.has(name)) return name;
  }
}

/** Names of parts that the solver adds round an open outline. */
const RESERVED = /^\((?:outside|beyond)\)$/;

function refuseTwins(regions: readonly RegionFile[], report: OpenReport): void {
  const firsts = new Map<string, number>();
  for (const [i, { name }] of regions.entries()) {
    const first = firsts.get(name);
    if (name !== '' && first !== undefined) {
      const wrong = `${showText(name)} is the name of regions.${first} too`;
      report.fault(['regions', i, 'name'], 'name-twice', wrong, 'give each region a name of its own');
    } else firsts.set(name, i);
    if (!RESERVED.test(name)) continue;
    report.fault(['regions', i, 'name'], 'reserved-name', 'is kept for the space outside', 'give another name');
  }
}

function checkCurrents(regions: readonly RegionFile[], report: OpenReport): void {
  for (const [i, { turns, current, current_density }] of regions.entries()) {
    if (turns === 0) {
      const remedy = 'give the number of turns, negative for a return side, or leave it out for 1';
      report.fault(['regions', i, 'turns'], 'out-of-range', 'must not be 0', remedy);
    }
    if (current === undefined || current_density === undefined) continue;
    const wrong = 'gives current and current_density at once';
    report.fault(['regions', i], 'one-of', wrong, 'give one of them; current is that of one turn');
  }
}

/** Turns x current spread over the region; densities as given. */
function currentsOf(regions: readonly RegionFile[]): Pick<Setup, 'current' | 'currentDensity'> {
  const current = regions.flatMap(({ name, turns = 1, current }) =>
    current === undefined ? [] : [[name, turns * current] as const],
  );
  const density = regions.flatMap(({ name, current_density }) =>
    current_density === undefined ? [] : [[name, current_density] as const],
  );
  return { current: bareRecord(current), currentDensity: bareRecord(density) };
}
