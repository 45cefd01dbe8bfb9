import { type Fault, InputError, MU0 } from '@gapwright/fem-core';
import {
  findDemagnetisationFaults,
  findTableFaults,
  stackedPermeability,
  stackedTable,
} from '@gapwright/fem-core/materials';
import { type Path, showText } from '@gapwright/fem-core/text';
import type { LibraryMaterial } from '../machine.js';
import { MATERIAL_LIBRARY } from '../materials/library.js';
import { nearestNames } from '../materials/nearest-names.js';
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
      const { coercivity_intrinsic, coercivity_slope, highest_temperature } = material;
      const curve = ownCurve(name, material, readBeside, report);
      const remanence = ownRemanence(name, material, curve, report);
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
        ...(curve === undefined ? {} : { demagnetisation: curve.rows }),
        recoil,
        remanenceSlope: material.remanence_slope ?? USUAL_REMANENCE_SLOPE,
        ...(coercivity_intrinsic === undefined ? {} : { coercivityIntrinsic: coercivity_intrinsic }),
        ...(coercivity_slope === undefined ? {} : { coercivitySlope: coercivity_slope }),
        ...(highest_temperature === undefined ? {} : { highestTemperature: highest_temperature }),
        ...common,
      };
    }
  }
}

type MagnetFile = UserMaterial & { readonly kind: 'magnet' };
type TellRow = (row: number, fault: Fault) => void;

/** A demagnetisation curve of the file, and how to tell what is wrong with one of its rows. */
interface OwnCurve {
  readonly key: 'demagnetisation' | 'demagnetisation_file';
  readonly rows: BhTable;
  readonly tell: TellRow;
}

/** The curve of the file or of a file beside it; undefined where none is given. */
function ownCurve(
  name: string,
  { demagnetisation, demagnetisation_file }: MagnetFile,
  readBeside: ReadBeside | undefined,
  report: Report,
): OwnCurve | undefined {
  const path = ['materials', name];
  if (demagnetisation !== undefined && demagnetisation_file !== undefined) {
    const wrong = 'gives demagnetisation and demagnetisation_file at once';
    report.fault(path, 'one-of', wrong, 'give one of them');
  }
  if (demagnetisation !== undefined) {
    const tell: TellRow = (row, { code, wrong, remedy }) =>
      report.fault([...path, 'demagnetisation', row], code, wrong, remedy);
    return { key: 'demagnetisation', rows: demagnetisation, tell };
  }
  if (demagnetisation_file === undefined) return undefined;
  const key = [...path, 'demagnetisation_file'];
  const rows = readRows(demagnetisation_file, key, '-4e5, 0.67', readBeside, report);
  const tell: TellRow = (row, fault) =>
    report.faultBeside(key, placedIn(rows ?? [], { ...fault, row }, demagnetisation_file));
  return { key: 'demagnetisation_file', rows: (rows ?? []).map(({ row }) => row), tell };
}

/** T; no magnet known today comes near it. */
const MOST_REMANENCE = 2;

/** Given as such, or by the curve's row [0, Br]; NaN where something is wrong, which is told. */
function ownRemanence(name: string, { remanence }: MagnetFile, curve: OwnCurve | undefined, report: Report): number {
  const path = ['materials', name];
  if (curve === undefined) {
    if (remanence !== undefined) return remanence;
    const remedy = 'give the remanence at 20 degC, for example 1.30 T, or a curve under demagnetisation';
    report.fault([...path, 'remanence'], 'missing', 'is missing', remedy);
    return Number.NaN;
  }
  if (remanence !== undefined) {
    const wrong = `gives remanence and ${curve.key} at once`;
    report.fault(path, 'one-of', wrong, 'leave out the remanence: it is that of the row [0, Br]');
  }
  const { rows, tell } = curve;
  if (rows.length === 0 || rows.flat().some(Number.isNaN)) return Number.NaN; // told already
  for (const fault of findDemagnetisationFaults(rows)) tell(rowOf(fault.key), fault);
  const row = rows.findIndex(([h]) => h === 0);
  const found = rows[row]?.[1] ?? Number.NaN;
  if (found > MOST_REMANENCE) {
    const wrong = `${figure(found)} T is more than any magnet's remanence`;
    tell(row, { code: 'implausible-remanence', key: '', wrong, remedy: 'give H in A/m, then B in T' });
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
  const rows = readRows(name, path, '200, 0.5', readBeside, report);
  if (rows === undefined) return [];
  const table = rows.map(({ row }) => row);
  for (const found of tableFaults(table)) report.faultBeside(path, placedIn(rows, found, name));
  return withOrigin(table);
}

/** The rows of a CSV file beside this one; undefined where something is wrong with it, which is told. */
function readRows(
  name: string,
  path: readonly string[],
  example: string,
  readBeside: ReadBeside | undefined,
  report: Report,
): readonly BhRow[] | undefined {
  if (name === '') return undefined; // told already
  let text: string;
  try {
    if (readBeside === undefined) throw new Error('no files can be read here');
    text = readBeside(name);
  } catch (error) {
    if (error instanceof InputError) for (const fault of error.faults) report.faultBeside(path, fault);
    else report.fault(path, 'unreadable-file', `cannot be read: ${reasonOf(error)}`, 'name a CSV file beside this one');
    return undefined;
  }
  const { rows, faults } = readBhCsv(text, name, example);
  for (const fault of faults) report.faultBeside(path, fault);
  return faults.length === 0 ? rows : undefined;
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

/** A/m: far below what can be measured. */
const LEAST_FIELD = 1e-9;

/** The first row that no material has: a table in other units, or with its columns the other way round. */
function implausible(rows: BhTable): readonly (Fault & { readonly row: number })[] {
  const code = 'implausible-bh';
  for (const [row, [h, b]] of rows.entries()) {
    if (h > 0 && h < LEAST_FIELD) {
      const wrong = `${h} A/m is too little to be measured`;
      return [{ code, key: '', wrong, remedy: 'check the unit of H: A/m', row }];
    }
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
  const remedy = `the nearest names are ${nearestNames(name, alike)
    .map((near) => showText(near))
    .join(', ')}; or describe it under materials`;
  const material = Object.hasOwn(materials, name) ? materials[name] : undefined;
  if (material === undefined) {
    report.fault(path, 'unknown-material', `${showText(name)} is not a known material`, remedy);
    return undefined;
  }
  if (suitable(material)) return material;
  report.fault(path, 'wrong-material', `must be ${wanted}, but ${showText(name)} is of kind ${material.kind}`, remedy);
  return undefined;
}
