import type { Answer, FieldValue, PlaceError, Probe, SectionAnswer } from '@gapwright/fem-core';
import { pastKnee } from '@gapwright/fem-core/field';
import { measureMesh, nodeCount, triangleCount } from '@gapwright/fem-core/mesh';
import { figure } from '../input/format-figure.js';
import type { Warning } from '../machine.js';
import { drawingWarnings } from './drawing-warnings.js';
import type { SectionProblem } from './read-section.js';
import type { LineResult, PointResult, ProbeResult, SectionResult } from './section-result.js';

/** What only the caller knows of a run. */
export interface SectionStamp {
  readonly version: string;
  /** SHA-256 of the section file with what was set over it, in hexadecimal digits. */
  readonly inputSha256: string;
}

/** The result of a section as it is printed and stored. `warnings` are the reader's; drawing and solution add theirs. */
export function describeSection(
  problem: SectionProblem,
  answer: SectionAnswer,
  warnings: readonly Warning[],
  stamp: SectionStamp,
): SectionResult {
  const { depth } = problem;
  const { mesh, report } = answer.field;
  const { energy, coenergy } = answer;
  const probes = answer.answers.map((found, i) => describeAnswer(found, problem.probes[i], depth));
  return {
    format: 'gapwright-section-result/1',
    gapwright: stamp.version,
    name: problem.name,
    input_sha256: stamp.inputSha256,
    depth_m: depth,
    energy_J_per_m: energy,
    energy_J_per_m_rel_err: relative(answer.energyError, energy),
    coenergy_J_per_m: coenergy,
    coenergy_J_per_m_rel_err: relative(answer.coenergyError, coenergy),
    energy_J: depth * energy,
    coenergy_J: depth * coenergy,
    mesh: { nodes: nodeCount(mesh), triangles: triangleCount(mesh), min_angle_deg: measureMesh(mesh).minAngleDeg },
    elements: problem.elements,
    newton_steps: report.steps,
    rel_err: answer.error,
    converged: report.converged,
    accurate: answer.accurate,
    probes,
    cautions: probes.flatMap(crushing),
    warnings: [...warnings, ...drawingWarnings(problem, mesh), ...solutionWarnings(problem, answer)],
  };
}

/** Bound over value; no error is none, even of nothing. */
const relative = (bound: number, value: number): number => (bound === 0 ? 0 : bound / Math.abs(value));

function describeAnswer(answer: Answer, probe: Probe, depth: number): ProbeResult {
  const { name } = answer;
  switch (answer.kind) {
    case 'point':
      return { name, kind: 'point', ...pointFigures(answer.value, answer.error) };
    case 'line':
      return describeLine(answer, probe);
    case 'force': {
      const { fx, fy, torque, error } = answer;
      return {
        name,
        kind: 'force_on',
        Fx_N_per_m: fx,
        Fx_N_per_m_rel_err: relative(error.force, fx),
        Fy_N_per_m: fy,
        Fy_N_per_m_rel_err: relative(error.force, fy),
        torque_Nm_per_m: torque,
        torque_Nm_per_m_rel_err: relative(error.torque, torque),
        Fx_N: depth * fx,
        Fy_N: depth * fy,
        torque_Nm: depth * torque,
      };
    }
    case 'linkage': {
      const { linkage, error } = answer;
      return {
        name,
        kind: 'linkage_of',
        linkage_Wb_per_m: linkage,
        linkage_Wb_per_m_rel_err: relative(error, linkage),
        linkage_Wb: depth * linkage,
      };
    }
    case 'flux': {
      const { flux, error } = answer;
      return {
        name,
        kind: 'flux_through',
        flux_Wb_per_m: flux,
        flux_Wb_per_m_rel_err: relative(error, flux),
        flux_Wb: depth * flux,
      };
    }
    case 'mean': {
      const { bx, by, b, error } = answer;
      return {
        name,
        kind: 'mean_over',
        Bx_T: bx,
        Bx_T_rel_err: relative(error, bx),
        By_T: by,
        By_T_rel_err: relative(error, by),
        B_T: b,
        B_T_rel_err: relative(error, b),
      };
    }
  }
}

type PointFigures = Omit<PointResult, 'name' | 'kind'>;

function pointFigures(value: FieldValue | undefined, error: PlaceError): PointFigures {
  const { a, bx, by, hx, hy } = value ?? NOWHERE;
  const b = Math.hypot(bx, by);
  return {
    A_Wb_per_m: a,
    A_Wb_per_m_rel_err: relative(error.a, a),
    Bx_T: bx,
    Bx_T_rel_err: relative(error.b, bx),
    By_T: by,
    By_T_rel_err: relative(error.b, by),
    B_T: b,
    B_T_rel_err: relative(error.b, b),
    Hx_A_per_m: hx,
    Hx_A_per_m_rel_err: relative(error.h, hx),
    Hy_A_per_m: hy,
    Hy_A_per_m_rel_err: relative(error.h, hy),
  };
}

const NOWHERE = { a: Number.NaN, bx: Number.NaN, by: Number.NaN, hx: Number.NaN, hy: Number.NaN };

function describeLine(answer: Answer & { readonly kind: 'line' }, probe: Probe): LineResult {
  if (probe.kind !== 'line') throw new Error(`answer ${answer.name} is of a line, its probe is not`);
  const { from, to } = probe;
  const last = answer.values.length - 1;
  const along = (k: 0 | 1): number[] =>
    answer.values.map((_, i) => from[k] + (last === 0 ? 0.5 : i / last) * (to[k] - from[k]));
  const figures = answer.values.map((value, i) => pointFigures(value, answer.errors[i]));
  const column = (key: keyof PointFigures): number[] => figures.map((at) => at[key]);
  return {
    name: answer.name,
    kind: 'line',
    s_m: answer.distance,
    x_m: along(0),
    y_m: along(1),
    A_Wb_per_m: column('A_Wb_per_m'),
    A_Wb_per_m_rel_err: column('A_Wb_per_m_rel_err'),
    Bx_T: column('Bx_T'),
    Bx_T_rel_err: column('Bx_T_rel_err'),
    By_T: column('By_T'),
    By_T_rel_err: column('By_T_rel_err'),
    B_T: column('B_T'),
    B_T_rel_err: column('B_T_rel_err'),
    Hx_A_per_m: column('Hx_A_per_m'),
    Hx_A_per_m_rel_err: column('Hx_A_per_m_rel_err'),
    Hy_A_per_m: column('Hy_A_per_m'),
    Hy_A_per_m_rel_err: column('Hy_A_per_m_rel_err'),
  };
}

/** A pull above this (N) crushes fingers; common practice. */
const CRUSHING_FORCE = 50;

function crushing(probe: ProbeResult): readonly string[] {
  if (probe.kind !== 'force_on') return [];
  const force = Math.hypot(probe.Fx_N, probe.Fy_N);
  if (!(force > CRUSHING_FORCE)) return [];
  return [
    `Crushing: ${probe.name} comes to ${figure(force)} N on the given depth, and a pull grows as the air gap ` +
      'closes. Guide the parts, keep fingers out of the gap, wear eye protection with magnets.',
  ];
}

function solutionWarnings(problem: SectionProblem, answer: SectionAnswer): readonly Warning[] {
  const { report } = answer.field;
  if (!report.converged) {
    const why = report.failure === undefined ? '' : ` (${report.failure})`;
    return [
      { key: '', text: `did not converge in ${report.steps} Newton steps${why}; its figures are not to be used` },
    ];
  }
  const warnings: Warning[] = [];
  if (!answer.accurate) {
    const text = `the wanted accuracy of ${figure(100 * problem.accuracy)} % was not reached; see rel_err`;
    warnings.push({ key: 'model.accuracy', text });
  }
  if (problem.section.open === true) warnings.push(...netCurrent(answer));
  warnings.push(...demagnetised(problem, answer));
  return warnings;
}

/** Magnets that lose remanence where they stand. */
function demagnetised({ section }: SectionProblem, { field }: SectionAnswer): readonly Warning[] {
  return section.regions.flatMap(({ name }, i) => {
    const past = pastKnee(field, name);
    if (past === undefined || past.share === 0) return [];
    const text =
      `${figure(100 * past.share)} % of this magnet lies past the knee of its curve (H along it down to ` +
      `${figure(past.lowest / 1000)} kA/m): what is lost there does not come back when the field goes`;
    return [{ key: `regions.${i}`, text }];
  });
}

/** Currents that do not return near by: their energy grows without bound with the space that is counted. */
function netCurrent(answer: SectionAnswer): readonly Warning[] {
  if (!Number.isNaN(answer.energy)) return [];
  const text =
    `the currents sum to ${figure(answer.field.netCurrent ?? 0)} A, and nothing in the section returns it: in unbounded space the ` +
    'energy then has no bound and is left out, and A and linkages are counted from a level of their own; B, forces and ' +
    'differences of A stand';
  return [{ key: 'regions', text }];
}
