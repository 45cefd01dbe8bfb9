import type { LineResult, ProbeResult, SectionProblem, SectionResult } from '@gapwright/machine-models';
import { figure, given, givenMm, meshError } from './figures.js';
import type { Floors } from './nought.js';
import { isNought, ROUNDING, roundingOf } from './nought.js';
import { cutText, plainText } from './plain-text.js';
import type { Sheet, SheetBlock, SheetGroup, SheetRow } from './sheet-parts.js';

/** What the command shows of a solved section. */
export function sectionSheet(problem: SectionProblem, result: SectionResult): Sheet {
  const floors = roundingOf(problem, result);
  const plain = result.probes.flatMap((probe) =>
    probe.kind === 'line' ? [] : probeRows(probe, result.depth_m, floors),
  );
  const answers: SheetGroup[] =
    plain.length === 0 ? [] : [{ heading: 'Probes', blocks: [{ kind: 'rows', rows: plain }] }];
  const lines = result.probes.flatMap((probe) => (probe.kind === 'line' ? [lineGroup(probe, floors)] : []));
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
    ...(result.elements === 'linear' ? [{ label: 'Elements', value: 'linear' }] : []),
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

const errorNote = (relative: number): string =>
  Number.isFinite(relative) ? meshError(unlessRounding(relative)) : 'error not known';

const unlessRounding = (relative: number): number => (relative < ROUNDING ? 0 : relative);

/** A figure and its error: a share of it, or where there is little left of it the bound itself. */
function told(
  value: number,
  relative: number,
  unit: string,
  floor: number,
): { readonly text: string; readonly note: string } {
  const nought = isNought(value, relative, floor);
  const text = `${engineering(nought ? 0 : value)}${unit}`;
  if (value === 0 || !Number.isFinite(relative) || !(nought || relative > 1))
    return { text, note: errorNote(relative) };
  return { text, note: `± ${engineering(Math.abs(value) * relative, 2)}${unit}` };
}

/** Of a vector: its error against its length, from that against its larger component; nought or not as a whole. */
function vectorTold(
  x: number,
  y: number,
  xError: number,
  yError: number,
  unit: string,
  floor: number,
): { readonly text: string; readonly note: string; readonly nought: boolean } {
  const [size, relative] = Math.abs(x) > Math.abs(y) ? [Math.abs(x), xError] : [Math.abs(y), yError];
  const length = Math.hypot(x, y);
  const share = size === 0 ? relative : (relative * size) / length;
  const nought = isNought(length, share, floor);
  const note = nought && length > 0 ? `± ${engineering(share * length, 2)}${unit}` : errorNote(share);
  return { text: `${nought ? 'x 0, y 0' : vector(x, y)} ${unit}`, note, nought };
}

/** `value` with as many decimals as `size` needs for four digits: a component beside its vector, a place beside the others. */
function beside(value: number, size: number): string {
  if (!Number.isFinite(value) || !(size > 1e-6 && size < 1e8)) return figure(value);
  const text = value.toFixed(Math.max(0, 3 - Math.floor(Math.log10(size))));
  return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text;
}

const vector = (x: number, y: number): string => `x ${beside(x, Math.hypot(x, y))}, y ${beside(y, Math.hypot(x, y))}`;

function probeRows(probe: Exclude<ProbeResult, { readonly kind: 'line' }>, depth: number, floors: Floors): SheetRow[] {
  const first = (value: string, note: string): SheetRow => ({ label: label(probe.name), value, note });
  const more = (value: string, note?: string): SheetRow =>
    note === undefined ? { label: '', value } : { label: '', value, note };
  const whole = `on ${givenMm(depth)} mm:`;
  /** A figure per depth, and what it is on the whole depth. */
  const both = (name: string, perMetre: number, relative: number, onDepth: number): SheetRow[] => {
    const { text, note } = told(perMetre, relative, 'Wb/m', floors.flux);
    const nought = isNought(perMetre, relative, floors.flux);
    return [first(`${name} ${text}`, note), more(`${whole} ${engineering(nought ? 0 : onDepth)}Wb`)];
  };
  switch (probe.kind) {
    case 'point': {
      const density = told(probe.B_T, probe.B_T_rel_err, 'T', floors.density);
      const potential = told(probe.A_Wb_per_m, probe.A_Wb_per_m_rel_err, 'Wb/m', floors.flux);
      const { Hx_A_per_m: hx, Hy_A_per_m: hy, Hx_A_per_m_rel_err: hxError, Hy_A_per_m_rel_err: hyError } = probe;
      const strength = vectorTold(hx, hy, hxError, hyError, 'A/m', floors.strength);
      const nought = isNought(probe.B_T, probe.B_T_rel_err, floors.density);
      return [
        first(nought ? 'B 0 T' : `B ${figure(probe.B_T)} T (${vector(probe.Bx_T, probe.By_T)})`, density.note),
        more(`A ${potential.text}`, potential.note),
        more(`H ${strength.text}`, strength.note),
      ];
    }
    case 'force_on': {
      const { Fx_N_per_m: fx, Fy_N_per_m: fy, torque_Nm_per_m: torque, torque_Nm_per_m_rel_err: torqueError } = probe;
      if (!Number.isFinite(torque)) return cutForce(probe, depth, floors);
      const push = vectorTold(fx, fy, probe.Fx_N_per_m_rel_err, probe.Fy_N_per_m_rel_err, 'N/m', floors.force);
      const twist = told(torque, torqueError, 'Nm/m', floors.torque);
      const onDepth = [
        push.nought ? 'x 0, y 0' : vector(probe.Fx_N, probe.Fy_N),
        engineering(isNought(torque, torqueError, floors.torque) ? 0 : probe.torque_Nm),
      ];
      return [
        first(`force ${push.text}`, push.note),
        more(`torque ${twist.text}`, twist.note),
        more(`${whole} ${onDepth[0]} N, ${onDepth[1]}Nm`),
      ];
    }
    case 'linkage_of':
      return both('linkage', probe.linkage_Wb_per_m, probe.linkage_Wb_per_m_rel_err, probe.linkage_Wb);
    case 'flux_through':
      return both('flux', probe.flux_Wb_per_m, probe.flux_Wb_per_m_rel_err, probe.flux_Wb);
    case 'mean_over': {
      const { note } = told(probe.B_T, probe.B_T_rel_err, 'T', floors.density);
      if (isNought(probe.B_T, probe.B_T_rel_err, floors.density)) return [first('|B| 0 T', note)];
      return [first(`|B| ${figure(probe.B_T)} T, B ${meanVector(probe)} T`, note)];
    }
  }
}

/** Of a body that the outline cuts in two only the force along the cut is known. */
function cutForce(
  probe: Extract<ProbeResult, { readonly kind: 'force_on' }>,
  depth: number,
  floors: Floors,
): SheetRow[] {
  const parts = [
    { axis: 'x', perMetre: probe.Fx_N_per_m, error: probe.Fx_N_per_m_rel_err, whole: probe.Fx_N },
    { axis: 'y', perMetre: probe.Fy_N_per_m, error: probe.Fy_N_per_m_rel_err, whole: probe.Fy_N },
  ].filter(({ perMetre }) => Number.isFinite(perMetre));
  const rows = parts.flatMap(({ axis, perMetre, error, whole }, i): SheetRow[] => {
    const nought = isNought(perMetre, error, floors.force);
    return [
      {
        label: i === 0 ? label(probe.name) : '',
        value: `force ${axis} ${figure(nought ? 0 : perMetre)} N/m, on half a body`,
        note: told(perMetre, error, 'N/m', floors.force).note,
      },
      { label: '', value: `on ${givenMm(depth)} mm: ${axis} ${figure(nought ? 0 : whole)} N` },
    ];
  });
  const why = 'the outline cuts the body: across the cut, and the torque, not known';
  return rows.length > 0 ? [...rows, { label: '', value: why }] : [{ label: label(probe.name), value: why }];
}

/** Components may cancel in the mean: they stand beside the mean of |B|. */
const meanVector = ({ Bx_T, By_T, B_T }: { Bx_T: number; By_T: number; B_T: number }): string =>
  `x ${beside(Bx_T, B_T)}, y ${beside(By_T, B_T)}`;

/** Points of a line shown on the sheet at most. */
const MOST_POINTS = 11;

function lineGroup(line: LineResult, floors: Floors): SheetGroup {
  const last = line.s_m.length - 1;
  const shown = Math.min(last + 1, MOST_POINTS);
  const picked = Array.from({ length: shown }, (_, k) => Math.round((k / (shown - 1)) * last));
  const largest = (values: readonly number[]): number =>
    Math.max(0, ...picked.map((i) => Math.abs(values[i])).filter(Number.isFinite));
  const strongest = largest(line.B_T);
  const column = (
    name: string,
    unit: string,
    values: readonly number[],
    size = largest(values),
    scale = 1,
    floor = 0,
  ) => {
    const cell = (value: number): string =>
      size < floor && Number.isFinite(value) ? '0' : beside(scale * value, scale * size);
    return { head: { name, unit }, cells: picked.map((i) => cell(values[i])) };
  };
  const reach = Math.max(largest(line.x_m), largest(line.y_m));
  const columns = [
    column('way', 'mm', line.s_m, largest(line.s_m), 1000),
    column('x', 'mm', line.x_m, reach, 1000),
    column('y', 'mm', line.y_m, reach, 1000),
    column('Bx', 'T', line.Bx_T, strongest, 1, floors.density),
    column('By', 'T', line.By_T, strongest, 1, floors.density),
    column('|B|', 'T', line.B_T, strongest, 1, floors.density),
    column('A', 'mWb/m', line.A_Wb_per_m, largest(line.A_Wb_per_m), 1000, floors.flux),
    {
      head: { name: 'mesh error', unit: '%' },
      cells: picked.map((i) => figure(100 * unlessRounding(line.B_T_rel_err[i]), 2)),
    },
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
