import type { LibraryMaterial } from '../machine.js';
import { THINNEST } from './check-layers.js';
import { findMaterial, hasUsualSlope } from './check-materials.js';
import { atLeastMillimetres, atMostMillimetres, figure, HAIR, millimetres } from './format-figure.js';
import type { Report } from './report.js';
import type { MachineFile } from './schema.js';
import type { RotorFile, SolvedMagnets } from './schema-rotor.js';

/** Inner and outer radius of the magnets, m. */
export function magnetRadii({ mean_radius, length }: SolvedMagnets): {
  readonly inner: number;
  readonly outer: number;
} {
  return { inner: mean_radius - length / 2, outer: mean_radius + length / 2 };
}

/** Everything about the rotor that one key alone does not tell. */
export function checkRotor(
  file: MachineFile,
  materials: Readonly<Record<string, LibraryMaterial>>,
  report: Report,
): void {
  const { rotor } = file;
  if (rotor.poles % 2 !== 0 && !Number.isNaN(rotor.poles)) {
    const remedy = `north and south alternate: give ${rotor.poles - 1} or ${rotor.poles + 1}`;
    report.fault(['rotor', 'poles'], 'odd-poles', `must be even, got ${rotor.poles}`, remedy);
  }
  if (rotor.arrangement === 'twin' && rotor.keeper !== undefined) {
    report.warn(['rotor', 'keeper'], 'not used: with arrangement twin both discs carry magnets');
  }
  checkMagnetMaterial(file, materials, report);
  if (rotor.magnets.shape !== 'round') {
    checkMagnets(rotor, rotor.magnets, report);
    checkDisc(rotor, rotor.magnets, report);
  }
  if (rotor.disc.material !== 'none') {
    const path = ['rotor', 'disc', 'material'];
    findMaterial(materials, rotor.disc.material, ['steel', 'steel-curve'], 'a steel', path, report);
  }
}

function checkMagnetMaterial(
  file: MachineFile,
  materials: Readonly<Record<string, LibraryMaterial>>,
  report: Report,
): void {
  const { material: name, temperature } = file.rotor.magnets;
  const path = ['rotor', 'magnets', 'material'];
  const material = findMaterial(materials, name, ['magnet'], 'a magnet material', path, report);
  if (material === undefined) return;
  const share = 1 + material.remanenceSlope * (temperature - 20);
  if (share <= 0) {
    const wrong = `at ${figure(temperature)} degC the slope of ${figure(material.remanenceSlope * 100)} %/K leaves no remanence`;
    report.fault(
      ['rotor', 'magnets', 'temperature'],
      'no-remanence',
      wrong,
      'give the temperature the magnets work at',
    );
  }
  const { coercivityIntrinsic, coercivitySlope } = material;
  if (
    coercivityIntrinsic !== undefined &&
    coercivitySlope !== undefined &&
    1 + coercivitySlope * (temperature - 20) <= 0
  ) {
    const wrong = `at ${figure(temperature)} degC the slope of ${figure(coercivitySlope * 100)} %/K leaves no coercivity: the magnets are lost`;
    const remedy = 'give the temperature the magnets work at, or a grade for it';
    report.fault(['rotor', 'magnets', 'temperature'], 'no-coercivity', wrong, remedy);
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

function checkMagnets(rotor: RotorFile, magnets: SolvedMagnets, report: Report): void {
  const { inner } = magnetRadii(magnets);
  const { poles } = rotor;
  if (inner <= 0) {
    const wrong = `${millimetres(magnets.length)} about a mean radius of ${millimetres(magnets.mean_radius)} reaches the shaft`;
    const remedy = `give less than ${millimetres(2 * magnets.mean_radius)}`;
    report.fault(['rotor', 'magnets', 'length'], 'magnets-at-shaft', wrong, remedy);
    return;
  }
  if (magnets.shape === 'sector') {
    if (magnets.arc === undefined && magnets.segments === 1) {
      const remedy = 'give the share of the pole pitch, for example 0.75';
      report.fault(['rotor', 'magnets', 'arc'], 'missing', 'is missing', remedy);
    }
    return;
  }
  const pitch = (2 * Math.PI * inner) / poles;
  if (magnets.width > pitch * (1 + HAIR)) {
    const wrong =
      `neighbouring magnets overlap: ${millimetres(magnets.width)} wide, but at their inner radius of ${millimetres(inner)} ` +
      `there are only ${millimetres(pitch)} from pole to pole`;
    // With the slot between them that `checkLayers` asks for, a share of the outer pole pitch.
    const half = magnets.length / 2;
    const slot = (THINNEST * 2 * Math.PI * (magnets.mean_radius + half)) / poles;
    const meanRadius = ((magnets.width * poles) / (2 * Math.PI) + half * (1 + THINNEST)) / (1 - THINNEST);
    const remedy = `give at most ${atMostMillimetres(pitch - slot)}, or a mean_radius of at least ${atLeastMillimetres(meanRadius)}`;
    report.fault(['rotor', 'magnets', 'width'], 'magnets-overlap', wrong, remedy);
  }
}

function checkDisc({ disc }: RotorFile, magnets: SolvedMagnets, report: Report): void {
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
  const { inner, outer } = magnetRadii(magnets);
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
