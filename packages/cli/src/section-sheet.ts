import type { LineResult, ProbeResult, SectionProblem, SectionResult } from '@gapwright/machine-models';
import { figure, given, givenMm, meshError } from './figures.js';
import { cutText, plainText } from './plain-text.js';
import type { Sheet, SheetBlock, SheetGroup, SheetRow } from './sheet.js';

/** What the command shows of a solved section. */
export function sectionSheet(problem: SectionProblem, result: SectionResult): Sheet {
  const plain = result.probes.flatMap((probe) => (probe.kind === 'line' ? [] : probeRows(probe, result.depth_m)));
  const answers: SheetGroup[] =
    plain.length === 0 ? [] : [{ heading: 'Probes', blocks: [{ kind: 'rows', rows: plain }] }];
  const lines = result.probes.flatMap((probe) => (probe.kind === 'line' ? [lineGroup(probe)] : []));
  return {
    title: plainText(result.name),
    groups: [sectionGroup(problem), solutionGroup(result), ...answers, ...lines],
    warnings: result.warnings.map(({ key, text }) => plainText(key === '' ? text : `${key}: ${text}`)),
    cautions: result.cautions.map(plainText),
  };
}

/** Regions told one by one at most. */
const MOST_REGIONS = 12;

function sectionGroup({ section, depth, materials, accuracy }: SectionProblem): SheetGroup {
  const some = materials.length > MOST_REGIONS ? materials.slice(0, MOST_REGIONS - 1) : materials;
  const rest = materials.length - some.length;
  const rows: SheetRow[] = [
    { label: 'Depth', value: `${givenMm(depth)} mm` },
    { label: 'Outside', value: section.open === true ? 'unbounded space' : 'bounded by the outline' },
    { label: 'Wanted accuracy', value: `${given(100 * accuracy)} %` },
    ...some.map(([region, material]) => ({ label: label(region), value: plainText(material) })),
    ...(rest > 0 ? [{ label: '...', value: `and ${rest} regions more` }] : []),
  ];
  return { heading: 'Section', blocks: [{ kind: 'rows', rows }] };
}

/** Labels stand in a column of their own. */
const label = (text: string): string => cutText(plainText(text), 22);

function solutionGroup(result: SectionResult): SheetGroup {
  const { mesh } = result;
  const rows: SheetRow[] = [
    {
      label: 'Mesh',
      value: `${mesh.triangles} triangles, ${mesh.nodes} nodes, smallest angle ${figure(mesh.min_angle_deg, 3)} deg`,
    },
    { label: 'Newton steps', value: String(result.newton_steps) },
    {
      label: 'Energy',
      value: `${engineering(result.energy_J_per_m)}J/m`,
      note: errorNote(result.energy_J_per_m_rel_err),
    },
    {
      label: 'Coenergy',
      value: `${engineering(result.coenergy_J_per_m)}J/m`,
      note: errorNote(result.coenergy_J_per_m_rel_err),
    },
    { label: 'Energy, whole depth', value: `${engineering(result.energy_J)}J` },
    { label: 'Largest mesh error', value: errorNote(result.rel_err) },
  ];
  return { heading: 'Solution', blocks: [{ kind: 'rows', rows }] };
}

const PREFIXES = ['p', 'n', 'u', 'm', '', 'k', 'M', 'G'] as const;

/** `12.34 m` for 0.01234, so that a unit can follow; `0 ` for nothing, `- ` for what is no number. */
export function engineering(value: number, digits = 4): string {
  if (value === 0 || !Number.isFinite(value)) return `${figure(value, digits)} `;
  const size = Math.abs(Number(value.toPrecision(digits)));
  const step = Math.max(-4, Math.min(3, Math.floor(Math.log10(size) / 3 + 1e-12)));
  return `${figure(value / 1000 ** step, digits)} ${PREFIXES[step + 4]}`;
}

const errorNote = (relative: number): string => (Number.isFinite(relative) ? meshError(relative) : 'error not known');

/** What the mesh leaves open of a figure: a share of it, or where there is little left of it the bound itself. */
function leftOpen(value: number, relative: number, unit: string): string {
  if (value === 0 || !(relative > 1)) return errorNote(relative);
  return Number.isFinite(relative) ? `± ${engineering(Math.abs(value) * relative, 2)}${unit}` : errorNote(relative);
}

/** Of a vector: its error against its length, from that against its larger component. */
function vectorError(x: number, y: number, xError: number, yError: number): string {
  const [size, relative] = Math.abs(x) > Math.abs(y) ? [Math.abs(x), xError] : [Math.abs(y), yError];
  return errorNote(size === 0 ? relative : (relative * size) / Math.hypot(x, y));
}

/** `value` with as many decimals as `size` needs for four digits: a component beside its vector, a place beside the others. */
function beside(value: number, size: number): string {
  if (!Number.isFinite(value) || !(size > 1e-6 && size < 1e8)) return figure(value);
  const text = value.toFixed(Math.max(0, 3 - Math.floor(Math.log10(size))));
  return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text;
}

const vector = (x: number, y: number): string => `x ${beside(x, Math.hypot(x, y))}, y ${beside(y, Math.hypot(x, y))}`;

function probeRows(probe: Exclude<ProbeResult, { readonly kind: 'line' }>, depth: number): SheetRow[] {
  const first = (value: string, note: string): SheetRow => ({ label: label(probe.name), value, note });
  const more = (value: string, note?: string): SheetRow =>
    note === undefined ? { label: '', value } : { label: '', value, note };
  const whole = `on ${givenMm(depth)} mm:`;
  switch (probe.kind) {
    case 'point':
      return [
        first(
          `B ${figure(probe.B_T)} T (${vector(probe.Bx_T, probe.By_T)})`,
          leftOpen(probe.B_T, probe.B_T_rel_err, 'T'),
        ),
        more(`A ${engineering(probe.A_Wb_per_m)}Wb/m`, leftOpen(probe.A_Wb_per_m, probe.A_Wb_per_m_rel_err, 'Wb/m')),
        more(
          `H ${vector(probe.Hx_A_per_m, probe.Hy_A_per_m)} A/m`,
          vectorError(probe.Hx_A_per_m, probe.Hy_A_per_m, probe.Hx_A_per_m_rel_err, probe.Hy_A_per_m_rel_err),
        ),
      ];
    case 'force_on': {
      const { Fx_N_per_m: fx, Fy_N_per_m: fy, torque_Nm_per_m: torque } = probe;
      if (!Number.isFinite(torque)) return cutForce(probe, depth);
      return [
        first(`force ${vector(fx, fy)} N/m`, vectorError(fx, fy, probe.Fx_N_per_m_rel_err, probe.Fy_N_per_m_rel_err)),
        more(`torque ${engineering(torque)}Nm/m`, leftOpen(torque, probe.torque_Nm_per_m_rel_err, 'Nm/m')),
        more(`${whole} ${vector(probe.Fx_N, probe.Fy_N)} N, ${engineering(probe.torque_Nm)}Nm`),
      ];
    }
    case 'linkage_of':
      return [
        first(
          `linkage ${engineering(probe.linkage_Wb_per_m)}Wb/m`,
          leftOpen(probe.linkage_Wb_per_m, probe.linkage_Wb_per_m_rel_err, 'Wb/m'),
        ),
        more(`${whole} ${engineering(probe.linkage_Wb)}Wb`),
      ];
    case 'flux_through':
      return [
        first(
          `flux ${engineering(probe.flux_Wb_per_m)}Wb/m`,
          leftOpen(probe.flux_Wb_per_m, probe.flux_Wb_per_m_rel_err, 'Wb/m'),
        ),
        more(`${whole} ${engineering(probe.flux_Wb)}Wb`),
      ];
    case 'mean_over':
      return [
        first(`|B| ${figure(probe.B_T)} T, B ${meanVector(probe)} T`, leftOpen(probe.B_T, probe.B_T_rel_err, 'T')),
      ];
  }
}

/** Of a body that the outline cuts in two only the force along the cut is known. */
function cutForce(probe: Extract<ProbeResult, { readonly kind: 'force_on' }>, depth: number): SheetRow[] {
  const parts = [
    { axis: 'x', perMetre: probe.Fx_N_per_m, error: probe.Fx_N_per_m_rel_err, whole: probe.Fx_N },
    { axis: 'y', perMetre: probe.Fy_N_per_m, error: probe.Fy_N_per_m_rel_err, whole: probe.Fy_N },
  ].filter(({ perMetre }) => Number.isFinite(perMetre));
  const rows = parts.flatMap(({ axis, perMetre, error, whole }, i): SheetRow[] => [
    {
      label: i === 0 ? label(probe.name) : '',
      value: `force ${axis} ${figure(perMetre)} N/m, on half a body`,
      note: errorNote(error),
    },
    { label: '', value: `on ${givenMm(depth)} mm: ${axis} ${figure(whole)} N` },
  ]);
  const why = 'the outline cuts the body: across the cut, and the torque, not known';
  return rows.length > 0 ? [...rows, { label: '', value: why }] : [{ label: label(probe.name), value: why }];
}

/** Components may cancel in the mean: they stand beside the mean of |B|. */
const meanVector = ({ Bx_T, By_T, B_T }: { Bx_T: number; By_T: number; B_T: number }): string =>
  `x ${beside(Bx_T, B_T)}, y ${beside(By_T, B_T)}`;

/** Points of a line shown on the sheet at most. */
const MOST_POINTS = 11;

function lineGroup(line: LineResult): SheetGroup {
  const last = line.s_m.length - 1;
  const shown = Math.min(last + 1, MOST_POINTS);
  const picked = Array.from({ length: shown }, (_, k) => Math.round((k / (shown - 1)) * last));
  const largest = (values: readonly number[]): number =>
    Math.max(0, ...picked.map((i) => Math.abs(values[i])).filter(Number.isFinite));
  const strongest = largest(line.B_T);
  const column = (name: string, unit: string, values: readonly number[], size = largest(values), scale = 1) => ({
    head: { name, unit },
    cells: picked.map((i) => beside(scale * values[i], scale * size)),
  });
  const reach = Math.max(largest(line.x_m), largest(line.y_m));
  const columns = [
    column('way', 'mm', line.s_m, largest(line.s_m), 1000),
    column('x', 'mm', line.x_m, reach, 1000),
    column('y', 'mm', line.y_m, reach, 1000),
    column('Bx', 'T', line.Bx_T, strongest),
    column('By', 'T', line.By_T, strongest),
    column('|B|', 'T', line.B_T, strongest),
    column('A', 'mWb/m', line.A_Wb_per_m, largest(line.A_Wb_per_m), 1000),
    { head: { name: 'mesh error', unit: '%' }, cells: picked.map((i) => figure(100 * line.B_T_rel_err[i], 2)) },
  ];
  const table: SheetBlock = {
    kind: 'table',
    columns: columns.map(({ head }) => head),
    rows: picked.map((_, k) => columns.map(({ cells }) => cells[k])),
    ...(last + 1 > shown
      ? { caption: `${shown} of ${last + 1} points; --out DIR writes all of them to lines.csv` }
      : {}),
  };
  return { heading: `Line: ${label(line.name)}`, blocks: [table] };
}
