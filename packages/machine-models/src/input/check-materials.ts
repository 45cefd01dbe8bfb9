import {
  editDistance,
  type Fault,
  findDemagnetisationFaults,
  findTableFaults,
  InputError,
  MU0,
  type Path,
  showText,
  stackedPermeability,
  stackedTable,
} from '@gapwright/fem-core';
import type { LibraryMaterial } from '../machine.js';
import { MATERIAL_LIBRARY } from '../materials/library.js';
import { type BhRow, readBhCsv } from './bh-csv.js';
import { figure } from './format-figure.js';
import type { Report } from './report.js';
import type { UserMaterial } from './schema-materials.js';

export type Materials = Readonly<Record<string, LibraryMaterial>>;
type UserMaterials = Readonly<Record<string, UserMaterial>>;
type BhTable = readonly (readonly [H: number, B: number])[];

/** The text of a file beside the machine file; throws, with a reason for its author, where it cannot be read. */
export type ReadBeside = (name: string) => string;

/** As the contract's example of a magnet; the slope is that of NdFeB. */
const USUAL_RECOIL = 1.05;
const USUAL_REMANENCE_SLOPE = -0.0012;

/** Above this a recoil permeability is no longer one of NdFeB, SmCo or hard ferrite (1.03 to 1.15). */
const HIGH_RECOIL = 1.3;

/** The library with the file's own materials added or in its place; a faulty one is there too, so that it is known. */
export function gatherMaterials(
  given: UserMaterials | undefined,
  readBeside: ReadBeside | undefined,
  report: Report,
): Materials {
  const own = Object.entries(given ?? {}).map(([name, material]): [string, LibraryMaterial] => [
    name,
    ownMaterial(name, material, readBeside, report),
  ]);
  return { ...MATERIAL_LIBRARY, ...Object.fromEntries(own) };
}

function ownMaterial(
  name: string,
  material: UserMaterial,
  readBeside: ReadBeside | undefined,
  report: Report,
): LibraryMaterial {
  const { density } = material;
  const common = { source: 'the machine file', ...(density === undefined ? {} : { density }) };
  switch (material.kind) {
    case 'nonmagnetic':
      return { kind: 'nonmagnetic', ...common };
    case 'steel':
      return { ...ownSteel(name, material, readBeside, report), ...common };
    case 'magnet': {
      const { demagnetisation, coercivity_intrinsic, coercivity_slope } = material;
      const remanence = ownRemanence(name, material, report);
      const recoil = material.recoil ?? USUAL_RECOIL;
      if (recoil > HIGH_RECOIL) {
        report.warn(
          ['materials', name, 'recoil'],
          `${recoil} is far above the 1.03 to 1.15 of NdFeB, SmCo and ferrite`,
        );
      }
      return {
        kind: 'magnet',
        remanence,
        ...(demagnetisation === undefined ? {} : { demagnetisation }),
        recoil,
        remanenceSlope: material.remanence_slope ?? USUAL_REMANENCE_SLOPE,
        ...(coercivity_intrinsic === undefined ? {} : { coercivityIntrinsic: coercivity_intrinsic }),
        ...(coercivity_slope === undefined ? {} : { coercivitySlope: coercivity_slope }),
        ...common,
      };
    }
  }
}

/** T; no magnet known today comes near it. */
const MOST_REMANENCE = 2;

/** Given as such, or by the curve's row [0, Br]; NaN where something is wrong, which is told. */
function ownRemanence(name: string, magnet: UserMaterial & { readonly kind: 'magnet' }, report: Report): number {
  const path = ['materials', name];
  const { remanence, demagnetisation: rows } = magnet;
  if (rows === undefined) {
    if (remanence !== undefined) return remanence;
    const remedy = 'give the remanence at 20 degC, for example 1.30 T, or a curve under demagnetisation';
    report.fault([...path, 'remanence'], 'missing', 'is missing', remedy);
    return Number.NaN;
  }
  if (remanence !== undefined) {
    const wrong = 'gives remanence and demagnetisation at once';
    report.fault(path, 'one-of', wrong, 'leave out the remanence: it is that of the row [0, Br]');
  }
  if (rows.length === 0 || rows.flat().some(Number.isNaN)) return Number.NaN; // told already
  for (const { key, code, wrong, remedy } of findDemagnetisationFaults(rows)) {
    report.fault([...path, 'demagnetisation', rowOf(key)], code, wrong, remedy);
  }
  const row = rows.findIndex(([h]) => h === 0);
  const found = rows[row]?.[1] ?? Number.NaN;
  if (found > MOST_REMANENCE) {
    const wrong = `${figure(found)} T is more than any magnet's remanence`;
    report.fault([...path, 'demagnetisation', row], 'implausible-remanence', wrong, 'give H in A/m, then B in T');
  }
  return found;
}

/** Whether the file leaves the remanence slope of this material to us; it matters away from 20 degC. */
export function hasUsualSlope(own: UserMaterials | undefined, name: string): boolean {
  const material = own && Object.hasOwn(own, name) ? own[name] : undefined;
  return material?.kind === 'magnet' && material.remanence_slope === undefined;
}

function ownSteel(
  name: string,
  steel: UserMaterial & { readonly kind: 'steel' },
  readBeside: ReadBeside | undefined,
  report: Report,
): { readonly kind: 'steel'; readonly muR: number } | { readonly kind: 'steel-curve'; readonly bh: BhTable } {
  const path = ['materials', name];
  const given = (['mu_r', 'bh', 'bh_file'] as const).filter((key) => steel[key] !== undefined);
  if (given.length !== 1) {
    const wrong = given.length === 0 ? 'says nothing of its magnetisation' : `gives ${given.join(' and ')} at once`;
    report.fault(path, 'one-of', wrong, 'give exactly one of mu_r, bh and bh_file');
  }
  const factor = steel.stacking_factor ?? 1;
  const stacked = (bh: BhTable) => ({
    kind: 'steel-curve' as const,
    bh: Number.isNaN(factor) ? bh : stackedTable(bh, factor),
  });
  if (steel.bh !== undefined) return stacked(checkRows(steel.bh, [...path, 'bh'], report));
  if (steel.bh_file !== undefined) return stacked(readTable(steel.bh_file, [...path, 'bh_file'], readBeside, report));
  const solid = steel.mu_r ?? Number.NaN;
  return { kind: 'steel', muR: Number.isNaN(factor) ? solid : stackedPermeability(solid, factor) };
}

function checkRows(rows: BhTable, path: readonly string[], report: Report): BhTable {
  if (rows.length === 0 || rows.flat().some(Number.isNaN)) return rows; // told already
  for (const { row, code, wrong, remedy } of tableFaults(rows)) report.fault([...path, row], code, wrong, remedy);
  return withOrigin(rows);
}

function readTable(name: string, path: readonly string[], readBeside: ReadBeside | undefined, report: Report): BhTable {
  if (name === '') return []; // told already
  let text: string;
  try {
    if (readBeside === undefined) throw new Error('no files can be read here');
    text = readBeside(name);
  } catch (error) {
    if (error instanceof InputError) for (const fault of error.faults) report.faultBeside(path, fault);
    else report.fault(path, 'unreadable-file', `cannot be read: ${reasonOf(error)}`, 'name a CSV file beside this one');
    return [];
  }
  const { rows, faults } = readBhCsv(text, name);
  for (const fault of faults) report.faultBeside(path, fault);
  const table = rows.map(({ row }) => row);
  if (faults.length === 0) {
    for (const found of tableFaults(table)) report.faultBeside(path, placedIn(rows, found, name));
  }
  return withOrigin(table);
}

function tableFaults(rows: BhTable): readonly (Fault & { readonly row: number })[] {
  const faults = findTableFaults(rows).map((fault) => ({ ...fault, row: rowOf(fault.key) }));
  return faults.length > 0 ? faults : implausible(rows);
}

/** From 'row 3' to the entry of the list, counted from 0. */
const rowOf = (key: string): number => Number(/\d+/.exec(key)) - 1;

/** T; iron-cobalt has 2.45 T (Bozorth, Ferromagnetism, 1951; from memory), the most there is. */
const MOST_POLARISATION = 2.6;
/** Of the best laboratory alloys, about (from memory). */
const MOST_PERMEABILITY = 1e6;

/** The first row that no material has: a table in other units, or with its columns the other way round. */
function implausible(rows: BhTable): readonly (Fault & { readonly row: number })[] {
  const code = 'implausible-bh';
  for (const [row, [h, b]] of rows.entries()) {
    const permeability = b / (MU0 * h);
    if (b - MU0 * h > MOST_POLARISATION) {
      const wrong = `${figure(b)} T is more than any material carries at ${figure(h)} A/m`;
      return [{ code, key: '', wrong, remedy: 'check units and columns: H in A/m, then B in T', row }];
    }
    if (permeability > MOST_PERMEABILITY) {
      const wrong = `${figure(b)} T at ${figure(h)} A/m makes the relative permeability ${permeability.toPrecision(2)}`;
      return [{ code, key: '', wrong, remedy: 'check the unit of H: A/m, not kA/m', row }];
    }
  }
  return [];
}

function placedIn(rows: readonly BhRow[], found: Fault & { readonly row: number }, file: string): Fault {
  const { row, ...fault } = found;
  return { ...fault, at: rows[row]?.at ?? { file, line: 1, column: 1 } };
}

function withOrigin(rows: BhTable): BhTable {
  return rows.length > 0 && rows[0][0] === 0 && rows[0][1] === 0 ? rows : [[0, 0], ...rows];
}

function reasonOf(error: unknown): string {
  return showText(error instanceof Error ? error.message : String(error), 200);
}

/** The material of that name if it is of the kind wanted there; tells what is wrong otherwise. */
export function findMaterial<K extends LibraryMaterial['kind']>(
  materials: Materials,
  name: string,
  kinds: readonly K[],
  wanted: string,
  path: Path,
  report: Report,
): (LibraryMaterial & { readonly kind: K }) | undefined {
  if (name === '') return undefined; // told already
  const suitable = (material: LibraryMaterial): material is LibraryMaterial & { readonly kind: K } =>
    kinds.some((kind) => kind === material.kind);
  const alike = Object.keys(materials).filter((known) => suitable(materials[known]));
  const remedy = `the nearest names are ${nearestNames(name, alike).join(', ')}; or describe it under materials`;
  const material = Object.hasOwn(materials, name) ? materials[name] : undefined;
  if (material === undefined) {
    report.fault(path, 'unknown-material', `${showText(name)} is not a known material`, remedy);
    return undefined;
  }
  if (suitable(material)) return material;
  report.fault(path, 'wrong-material', `must be ${wanted}, but ${showText(name)} is of kind ${material.kind}`, remedy);
  return undefined;
}

/** Three of them; long ones, and those beyond the first thousand, are not looked at. */
function nearestNames(name: string, known: readonly string[]): readonly string[] {
  return known
    .filter((candidate) => candidate.length <= 40)
    .slice(0, 1000)
    .map((candidate) => ({ candidate, slips: editDistance(name.slice(0, 40), candidate) }))
    .sort((a, b) => a.slips - b.slips)
    .slice(0, 3)
    .map(({ candidate }) => showText(candidate));
}
