import type { LibraryMaterial } from '../machine.js';
import { MAGNET_GRADES } from './magnet-grades.js';
import { type RoschkeFit, roschkeTable } from './roschke.js';

const STEEL_SOURCE =
  "fit by Roschke's formula, parameters of the Modelica Standard Library (BSD-3-Clause); cut at the highest polarisation, " +
  'slope mu0 beyond; machining lowers the permeability of real parts';

/** Every material known without being described in a file, by its name. */
export const MATERIAL_LIBRARY: Readonly<Record<string, LibraryMaterial>> = {
  air: { kind: 'nonmagnetic', source: 'relative permeability 1' },
  copper: { kind: 'nonmagnetic', density: 8890, source: 'density: IEC 60028' },
  aluminium: { kind: 'nonmagnetic', density: 2700, source: 'density: common value' },
  'stainless steel': {
    kind: 'nonmagnetic',
    density: 7900,
    source: 'austenitic, not cold worked, taken as nonmagnetic; density: common value',
  },
  'AISI 1008': steel({ initial: 200, bMax: 1.17, ca: 8100, cb: 2.59, n: 10 }, 7850),
  DC01: steel({ initial: 5, bMax: 1.1, ca: 6450, cb: 3.65, n: 7.7 }, 7850),
  'M330-50A': steel({ initial: 500, bMax: 0.7, ca: 24000, cb: 9.38, n: 9.6 }, 7700),
  ...MAGNET_GRADES,
};

function steel(fit: RoschkeFit, density: number): LibraryMaterial {
  return { kind: 'steel-curve', bh: roschkeTable(fit), density, source: STEEL_SOURCE };
}
