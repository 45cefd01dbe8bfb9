import type { LibraryMaterial } from '../machine.js';
import { FERRITE_GRADES, NEODYMIUM_GRADES, SAMARIUM_GRADES } from './magnet-grades.js';
import { type RoschkeFit, roschkeTable } from './roschke.js';
import { BENCHMARK_STEEL, type BhTable, CAST_IRON, SHEET_330, SHEET_400, SHEET_470 } from './steel-tables.js';

const FROM = 'Modelica Standard Library (BSD-3-Clause), flux tubes';
const FIT =
  `fit by Roschke's formula, parameters of the ${FROM}, best from about 1 to 2 T; cut at the highest polarisation, ` +
  'slope mu0 beyond';
const MACHINING = 'machining lowers the permeability of real parts';

/** Materials of a kind, as they are listed. */
export interface MaterialGroup {
  readonly heading: string;
  readonly materials: Readonly<Record<string, LibraryMaterial>>;
}

/** Every material known without being described in a file, in the order to list them. */
export const MATERIAL_GROUPS: readonly MaterialGroup[] = [
  {
    heading: 'Nonmagnetic',
    materials: {
      air: { kind: 'nonmagnetic', source: 'relative permeability 1' },
      copper: { kind: 'nonmagnetic', density: 8890, source: 'density: IEC 60028' },
      aluminium: { kind: 'nonmagnetic', density: 2700, source: 'density: common value' },
      'stainless steel': {
        kind: 'nonmagnetic',
        density: 7900,
        source: 'austenitic, not cold worked, taken as nonmagnetic; density: common value',
      },
    },
  },
  {
    heading: 'Low-carbon steel',
    materials: {
      'AISI 1008': lowCarbon({ initial: 200, bMax: 1.17, ca: 8100, cb: 2.59, n: 10 }),
      DC01: lowCarbon({ initial: 5, bMax: 1.1, ca: 6450, cb: 3.65, n: 7.7 }),
      'AISI 12L14': lowCarbon({ initial: 10, bMax: 0.94, ca: 5900, cb: 4.19, n: 6.4 }),
      'benchmark steel': curve(
        BENCHMARK_STEEL,
        7850,
        'steel of benchmark problem 13 of the TEAM workshops (Nakata, Takahashi, Fujiwara and others; COMPEL 14, 1995, 91-101), ' +
          'points and saturation laws read second-hand; density: common value',
      ),
    },
  },
  {
    heading: 'Electrical steel',
    materials: {
      'M330-50A': sheet(
        roschkeTable({ initial: 500, bMax: 0.7, ca: 24000, cb: 9.38, n: 9.6 }),
        `after machining and packeting: ${FIT}. It saturates far sooner than the sheet as delivered`,
      ),
      'M330-50A as delivered': sheet(SHEET_330, `maker's data sheet, 0.5 to 1.9 T, through the ${FROM}; ${MACHINING}`),
      'M350-50A': sheet(
        roschkeTable({ initial: 1210, bMax: 1.16, ca: 24630, cb: 2.44, n: 14 }),
        `strip: ${FIT}; ${MACHINING}`,
      ),
      'M400-50A': sheet(SHEET_400, `maker's data sheet, 0.5 to 1.9 T, through the ${FROM}; ${MACHINING}`),
      'M470-50A': sheet(SHEET_470, `measured by the maker (voestalpine), through the ${FROM}; ${MACHINING}`),
    },
  },
  {
    heading: 'Cast iron',
    materials: {
      'cast iron': curve(
        CAST_IRON,
        7500,
        `grey iron for teaching, artificial though realistic, not measured: ${FROM}; real irons differ widely`,
      ),
    },
  },
  { heading: 'Sintered NdFeB', materials: NEODYMIUM_GRADES },
  { heading: 'Hard ferrite', materials: FERRITE_GRADES },
  { heading: 'Samarium cobalt', materials: SAMARIUM_GRADES },
];

/** The same by name. */
export const MATERIAL_LIBRARY: Readonly<Record<string, LibraryMaterial>> = Object.fromEntries(
  MATERIAL_GROUPS.flatMap(({ materials }) => Object.entries(materials)),
);

function curve(bh: BhTable, density: number, source: string): LibraryMaterial {
  return { kind: 'steel-curve', bh, density, source };
}

function lowCarbon(fit: RoschkeFit): LibraryMaterial {
  return curve(roschkeTable(fit), 7850, `${FIT}; ${MACHINING}; density: common value`);
}

/** 7700 kg/m3 is told for two of the grades and taken for all. */
function sheet(bh: BhTable, source: string): LibraryMaterial {
  return curve(bh, 7700, source);
}
