import type { LibraryMaterial, Magnets } from '../machine.js';
import { lostAt, temperatureWarning } from '../materials/at-temperature.js';
import { magnetReach } from '../rotor/magnet-shape.js';
import { checkInterpoles } from './check-interpoles.js';
import { checkMagnets } from './check-magnets.js';
import { findMaterial, hasUsualSlope } from './check-materials.js';
import { atLeastMillimetres, atMostMillimetres, figure, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';
import type { RotorFile } from './schema-rotor.js';

/** Everything about the rotor that one key alone does not tell. */
export function checkRotor(
  file: MachineFile,
  magnets: Magnets,
  materials: Readonly<Record<string, LibraryMaterial>>,
  report: Report,
): void {
  const { rotor } = file;
  if (rotor.poles % 2 !== 0 && !Number.isNaN(rotor.poles)) {
    const remedy = `north and south alternate: give ${rotor.poles - 1} or ${rotor.poles + 1}`;
    report.fault(['rotor', 'poles'], 'odd-poles', `must be even, got ${rotor.poles}`, remedy);
  }
  const pitch = (2 * Math.PI * magnets.meanRadius) / rotor.poles;
  if (rotor.gap > pitch) {
    const text = `${millimetres(rotor.gap)} is more than a pole pitch of ${millimetres(pitch)}: hardly any field gets across`;
    report.warn(['rotor', 'gap'], text);
  }
  checkMagnetMaterial(file, 'magnets', materials, report);
  checkMagnetMaterial(file, 'interpoles', materials, report);
  checkMagnets(rotor, magnets, report);
  checkInterpoles(rotor, magnets, report);
  checkDisc(rotor, magnets, report);
  if (rotor.disc.material !== 'none') {
    const path = ['rotor', 'disc', 'material'];
    findMaterial(materials, rotor.disc.material, ['steel', 'steel-curve'], 'a steel', path, report);
  }
  checkKeeper(rotor, materials, report);
}

function checkKeeper(
  { arrangement, keeper, disc }: RotorFile,
  materials: Readonly<Record<string, LibraryMaterial>>,
  report: Report,
): void {
  const path = ['rotor', 'keeper'];
  if (arrangement === 'twin') {
    if (keeper !== undefined) report.warn(path, 'not used: with arrangement twin both discs carry magnets');
    return;
  }
  if (keeper?.material !== undefined) {
    const at = [...path, 'material'];
    findMaterial(materials, keeper.material, ['steel', 'steel-curve'], 'a steel', at, report);
  }
  if (disc.material !== 'none') return;
  // An ironless magnet disc has nothing that the keeper could be made like.
  for (const key of ['material', 'thickness'] as const) {
    if (keeper?.[key] !== undefined) continue;
    const remedy = `the disc has none to go by: give ${key === 'material' ? 'the name of a steel' : 'a size, for example 10 mm'}`;
    report.fault(
      keeper === undefined ? ['rotor', 'arrangement'] : [...path, key],
      'missing',
      `the keeper's ${key} is missing`,
      remedy,
    );
  }
}

/** Main magnets and interpoles alike: the material, and what the magnets' temperature leaves of it. */
function checkMagnetMaterial(
  file: MachineFile,
  part: 'magnets' | 'interpoles',
  materials: Readonly<Record<string, LibraryMaterial>>,
  report: Report,
): void {
  const { magnets, interpoles } = file.rotor;
  const name = part === 'magnets' ? magnets.material : interpoles?.material;
  if (name === undefined) return;
  const { temperature } = magnets;
  const path = ['rotor', part, 'material'];
  const material = findMaterial(materials, name, ['magnet'], 'a magnet material', path, report);
  if (material === undefined || (part === 'interpoles' && name === magnets.material)) return;
  const at = part === 'magnets' ? ['rotor', 'magnets', 'temperature'] : path;
  const lost = lostAt(material, temperature);
  if (lost === 'remanence') {
    const wrong = `at ${figure(temperature)} degC the slope of ${figure(material.remanenceSlope * 100)} %/K leaves no remanence`;
    report.fault(at, 'no-remanence', wrong, 'give the temperature the magnets work at');
  } else if (lost === 'coercivity') {
    const slope = figure((material.coercivitySlope ?? 0) * 100);
    const wrong = `at ${figure(temperature)} degC the slope of ${slope} %/K leaves no coercivity: the magnets are lost`;
    const remedy = 'give the temperature the magnets work at, or a grade for it';
    report.fault(at, 'no-coercivity', wrong, remedy);
  } else {
    const hot = temperatureWarning(material, temperature);
    if (hot !== undefined) report.warn(at, `${name}: ${hot}`);
  }
  if (material.remanenceSlope > 0) {
    const slope = figure(100 * material.remanenceSlope);
    report.warn(
      path,
      `its remanence rises by ${slope} %/K with temperature; that of magnets falls: check the sign of the slope`,
    );
  }
  if (material.demagnetisation !== undefined) {
    report.warn(
      path,
      'its demagnetisation curve is not followed by the slices: they take the line of remanence and recoil',
    );
  }
  if (temperature !== 20 && hasUsualSlope(file.materials, name)) {
    report.warn(['materials', name, 'remanence_slope'], 'not given; -0.12 %/K, as usual for NdFeB, is taken');
  }
}

function checkDisc({ disc }: RotorFile, magnets: Magnets, report: Report): void {
  const path = ['rotor', 'disc'];
  const sizes = ['thickness', 'inner_radius', 'outer_radius'] as const;
  if (disc.material === 'none') {
    const given = [...sizes, 'clamp_radius' as const].filter((key) => disc[key] !== undefined);
    if (given.length > 0) {
      const remedy = 'leave the sizes out, or name a steel';
      report.fault([...path, given[0]], 'needless', `material none takes no sizes, got ${given.join(', ')}`, remedy);
    }
    return;
  }
  for (const key of sizes.filter((size) => disc[size] === undefined)) {
    report.fault([...path, key], 'missing', 'is missing', 'give a size, for example 10 mm');
  }
  const { inner, outer } = magnetReach(magnets);
  if (inner <= 0) return; // told already
  const { inner_radius: hole = Number.NaN, outer_radius: rim = Number.NaN, clamp_radius: clamp = 0 } = disc;
  if (rim < outer - HAIR) {
    const wrong = `the disc ends at ${millimetres(rim)}, its magnets at ${millimetres(outer)}`;
    report.fault([...path, 'outer_radius'], 'disc-too-small', wrong, `give at least ${atLeastMillimetres(outer)}`);
  } else if (magnets.shape === 'block' && Math.hypot(outer, magnets.width / 2) > rim + HAIR) {
    const corner = Math.hypot(outer, magnets.width / 2);
    report.warn(
      [...path, 'outer_radius'],
      `the magnets' corners reach ${millimetres(corner)} and stand over the disc of ${millimetres(rim)}`,
    );
  }
  if (hole > inner + HAIR) {
    const wrong = `the disc begins at ${millimetres(hole)}, its magnets at ${millimetres(inner)}`;
    report.fault([...path, 'inner_radius'], 'disc-too-small', wrong, `give at most ${atMostMillimetres(inner)}`);
  }
  if (hole >= rim) {
    const wrong = `the hole of ${millimetres(hole)} leaves nothing of a disc of ${millimetres(rim)}`;
    report.fault([...path, 'inner_radius'], 'empty-disc', wrong, `give less than ${millimetres(rim)}`);
  }
  if (clamp >= rim) {
    const wrong = `must lie within the disc of ${millimetres(rim)}, got ${millimetres(clamp)}`;
    report.fault(
      [...path, 'clamp_radius'],
      'clamp-outside',
      wrong,
      'give the radius up to which a hub or flange holds the disc',
    );
  } else if (clamp > inner) {
    report.warn(
      [...path, 'clamp_radius'],
      `the disc is held up to ${millimetres(clamp)}, behind magnets that begin at ${millimetres(inner)}`,
    );
  }
}
