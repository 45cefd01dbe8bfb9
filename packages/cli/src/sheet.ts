import type { Machine, MachineResult, VoltageResult } from '@gapwright/machine-models';
import { coercivityAt, remanenceAt } from '@gapwright/machine-models';
import { figure, force, given, givenMm, henry, meshError, mm, percent, power, resistance } from './figures.js';
import { plainText } from './plain-text.js';
import { costRows, mechanicalRows, serviceGroups } from './service-sheet.js';
import type { Sheet, SheetBlock, SheetGroup, SheetRow, SheetTable } from './sheet-parts.js';

/** What the commands and the report show of a solved machine. */
export function datasheet(machine: Machine, result: MachineResult): Sheet {
  return {
    title: plainText(result.machine),
    groups: [
      machineGroup(machine),
      slicesGroup(machine, result),
      emfGroup(result),
      windingGroup(machine, result),
      meritGroup(result),
      ...serviceGroups(result),
      mechanicalGroup(result),
    ],
    notes: result.notes.map(plainText),
    warnings: result.warnings.map(({ key, text }) => plainText(key === '' ? text : `${key}: ${text}`)),
    cautions: result.cautions.map(plainText),
  };
}

/** The group that needs no field: what was asked for. */
export function machineGroup({ rotor, winding, operation, materials }: Machine): SheetGroup {
  const { magnets, disc } = rotor;
  const legs = `${givenMm(winding.legWidth)} mm wide (${winding.legShape}), ${givenMm(winding.thickness)} mm thick`;
  const rows: SheetRow[] = [
    { label: 'Rotor', value: `${rotor.arrangement}, ${rotor.poles} poles, gap ${givenMm(rotor.gap)} mm` },
    { label: 'Magnets', value: `${magnetText(magnets)}, mean radius ${givenMm(magnets.meanRadius)} mm` },
    {
      label: 'Magnet material',
      value: magnetMaterial(magnets.material, magnets.temperature, materials),
    },
    ...interpoleRows(rotor, materials),
    {
      label: rotor.keeper === undefined ? 'Discs' : 'Disc',
      value:
        disc === undefined
          ? 'none'
          : `${plainText(disc.material)}, ${givenMm(disc.thickness)} mm thick, radius ${givenMm(disc.innerRadius)} to ${givenMm(disc.outerRadius)} mm`,
    },
    ...(rotor.keeper === undefined
      ? []
      : [
          {
            label: 'Keeper',
            value: `${plainText(rotor.keeper.material)}, ${givenMm(rotor.keeper.thickness)} mm thick, turns with the magnets`,
          },
        ]),
    {
      label: 'Winding',
      value: `${winding.layout}, ${winding.coils} coils of ${winding.turns} turns, ${winding.phases} phases in ${winding.phases === 6 ? 'two stars' : winding.connection}${winding.paths > 1 ? `, ${winding.paths} parallel paths` : ''}`,
    },
    { label: 'Legs', value: `${legs}, ${givenMm(winding.clearance)} mm clearance each side` },
    { label: 'Wire', value: wireText(winding.wire) },
    {
      label: 'Operation',
      value: `${given(operation.speedRpm)} rpm${operation.overspeedRpm === undefined ? '' : `, overspeed ${given(operation.overspeedRpm)} rpm`}; winding at ${given(winding.temperature)} degC`,
    },
  ];
  return { heading: 'Machine', blocks: [rowsBlock(rows)] };
}

function magnetText(magnets: Machine['rotor']['magnets']): string {
  const thick = `${givenMm(magnets.thickness)} mm`;
  switch (magnets.shape) {
    case 'block':
      return `blocks ${givenMm(magnets.width)} x ${givenMm(magnets.length)} x ${thick}`;
    case 'round':
      return `round, diameter ${givenMm(magnets.diameter)} mm, ${thick} thick`;
    case 'sector': {
      const size = `${givenMm(magnets.length)} mm long, ${thick} thick`;
      return magnets.segments > 1
        ? `Halbach array, ${magnets.segments} pieces a pole, ${size}`
        : `sectors, arc ${given(magnets.arc)} of the pole pitch, ${size}`;
    }
  }
}

function interpoleRows({ interpoles, magnets }: Machine['rotor'], materials: Machine['materials']): SheetRow[] {
  if (interpoles === undefined) return [];
  const { width, depth, through, material } = interpoles;
  const across = width === 'fill' ? 'fill the room between the magnets' : `${givenMm(width)} mm wide`;
  const deep = through ? `${givenMm(depth)} mm deep, through the disc` : `${givenMm(depth)} mm deep`;
  return [
    { label: 'Interpoles', value: `${across}, ${deep}, ${magnetMaterial(material, magnets.temperature, materials)}` },
  ];
}

const rowsBlock = (rows: readonly SheetRow[]): SheetBlock => ({ kind: 'rows', rows });

function magnetMaterial(name: string, celsius: number, materials: Machine['materials']): string {
  const material = materials[name];
  if (material?.kind !== 'magnet') return plainText(name);
  const coercivity = coercivityAt(material, celsius);
  const held = coercivity === undefined ? '' : `, HcJ ${figure(coercivity / 1000, 3)} kA/m`;
  return `${plainText(name)}, recoil ${given(material.recoil)}; ${figure(remanenceAt(material, celsius), 3)} T${held} at ${given(celsius)} degC`;
}

function wireText(wire: Machine['winding']['wire']): string {
  const strand =
    wire.diameter === undefined
      ? `${givenMm(wire.width ?? 0)} x ${givenMm(wire.height ?? 0)} mm`
      : `${givenMm(wire.diameter)} mm bare`;
  const copper = `${figure(1e6 * wire.strands * wire.strandArea, 3)} mm2 copper`;
  const enamel = wire.enamel === undefined ? '' : `, enamel ${plainText(wire.enamel)}`;
  return `${wire.strands} ${wire.strands === 1 ? 'strand' : 'strands in hand'} of ${strand}, ${copper}${enamel}`;
}

/** Electrical degrees between neighbouring phases of one star. */
const APART = { 2: 90, 3: 120, 5: 72, 6: 120 } as const;

function slicesGroup(machine: Machine, result: MachineResult): SheetGroup {
  const { slices, effective_B: effective } = result;
  const column = (name: string, unit: string) => ({ name, unit });
  const field: SheetTable = {
    columns: [
      column('radius', 'mm'),
      column('pole pitch', 'mm'),
      column('gap B1', 'T'),
      column('gap B3', 'T'),
      column('leg peak', 'T'),
      column('leg B1', 'T'),
      column('line peak', 'T'),
      column('mesh', '± %'),
      column('disc', 'T'),
      column('steel peak', 'T'),
      column('pull', 'kN/m'),
    ],
    rows: slices.map((slice) => [
      mm(slice.radius_m),
      mm(slice.pole_pitch_m),
      harmonic(slice.mid_B, 1),
      harmonic(slice.mid_B, 3),
      figure(slice.leg_B.peak_T),
      figure(slice.leg_B.fundamental_T),
      figure(slice.line_B_peak_T),
      (100 * slice.leg_B_rel_err).toFixed(3),
      slice.disc_B_T === undefined ? '-' : figure(slice.disc_B_T, 3),
      slice.peak_steel_B_T === undefined ? '-' : figure(slice.peak_steel_B_T, 3),
      figure(slice.pull_N_per_m_pole / 1000, 3),
    ]),
    caption:
      'B1, B3: harmonics on the mid-plane of the gap; leg: averaged over a leg; pull: per pole and metre of radius',
  };
  const mesh = slices.map(({ mesh: { nodes, triangles, min_angle_deg }, newton_steps }, k) => ({
    label: `Mesh at ${mm(slices[k].radius_m)} mm`,
    value: `${triangles} triangles, ${nodes} nodes, angles from ${figure(min_angle_deg, 3)} deg, ${newton_steps} Newton ${newton_steps === 1 ? 'step' : 'steps'}`,
  }));
  const rows: SheetRow[] = [
    {
      label: 'Effective B, leg',
      value: `${figure(effective.peak_T)} T peak`,
      note: `${meshError(effective.peak_T_rel_err)}, wanted ${percent(machine.model.accuracy, 2)}`,
    },
    {
      label: 'Effective B, line',
      value: `${figure(effective.line_peak_T)} T peak`,
      note: meshError(effective.line_peak_T_rel_err),
    },
    {
      label: 'Third harmonic',
      value: `${percent(effective.third_share_phase)} of the flux a leg cuts, ${percent(effective.third_share_line)} of leg less leg ${APART[machine.winding.phases]} deg on`,
    },
    ...mesh,
  ];
  return { heading: 'Slices', blocks: [{ kind: 'table', ...field }, rowsBlock(rows)] };
}

function harmonic(
  series: { readonly order: readonly number[]; readonly amplitude_T: readonly number[] },
  order: number,
): string {
  const k = series.order.indexOf(order);
  return k < 0 ? '-' : series.amplitude_T[k].toFixed(4);
}

function emfGroup({ emf, winding }: MachineResult): SheetGroup {
  const voltage = (name: string, v: VoltageResult): SheetRow[] => [
    { label: `${name}, rms`, value: `${figure(v.rms_V)} V`, note: meshError(v.rms_V_rel_err) },
    { label: `${name}, peak`, value: `${figure(v.peak_V)} V`, note: meshError(v.peak_V_rel_err) },
    {
      label: `${name}, fundamental`,
      value: `${figure(v.fundamental_rms_V)} V rms`,
      note: meshError(v.fundamental_rms_V_rel_err),
    },
    {
      label: `${name}, distortion`,
      value: `${percent(v.thd)}, harmonics over fundamental`,
      note: meshError(v.thd_rel_err),
    },
  ];
  const rows = [
    { label: 'Speed', value: `${given(emf.speed_rpm)} rpm, ${figure(emf.frequency_Hz)} Hz` },
    ...endRows(emf),
    ...voltage('Phase', emf.phase),
    ...voltage('Line', emf.line),
    {
      label: 'Line per speed',
      value: `${figure(1000 * emf.line_rms_V_per_rpm)} V rms per 1000 rpm`,
      note: meshError(emf.line_rms_V_per_rpm_rel_err),
    },
    {
      label: 'Rectified mean',
      value: `${figure(emf.rectified_mean_V)} V, without diode drop`,
      note: meshError(emf.rectified_mean_V_rel_err),
    },
  ];
  if (emf.end_corrected && emf.end_factor_band_rel !== undefined) {
    const all = emf.end_factor_band_rel + emf.phase.rms_V_rel_err;
    const value = `${figure(emf.phase.rms_V, 3)} V phase, ${figure(emf.line.rms_V, 3)} V line, rms`;
    rows.push({ label: 'All told', value, note: `± ${percent(all, 2)}, mesh and end factor` });
  }
  return {
    heading: 'EMF with no load',
    blocks: [rowsBlock(rows), { kind: 'table', ...harmonicsTable(emf, winding) }],
  };
}

/** What the third dimension does to the EMF, and the EMF without it. */
function endRows(emf: MachineResult['emf']): SheetRow[] {
  const alone = `${figure(emf.slices_alone.phase_rms_V)} V, phase rms`;
  const { end_factor: factor, end_factor_band_rel: band = 0, end_factor_legs: legs = 1 } = emf;
  if (factor === undefined) return [];
  return [
    { label: 'Slices alone', value: alone },
    {
      label: 'End factor',
      value: `${figure(factor)}${emf.end_corrected ? '' : ' (off: not applied)'}`,
      note: `± ${percent(band, 2)}, its model`,
    },
    { label: 'End factor, legs', value: `${figure(legs)}, straight legs over the magnets alone` },
  ];
}

const ENDS_TAKEN = 'end factor included; ± is what mesh and sums leave, the band of the end factor comes on top';
const SLICES_ALONE =
  'from the slices alone, without end factor: expect some percent less; ± is what the mesh leaves, no more';

function harmonicsTable(emf: MachineResult['emf'], winding: MachineResult['winding']): SheetTable {
  const at = (orders: readonly number[], values: readonly number[], order: number): number | undefined =>
    values[orders.indexOf(order)];
  const cells = (voltage: VoltageResult, n: number): string[] => {
    const { order, harmonic_rms_V, harmonic_rms_V_rel_err, fundamental_rms_V } = voltage;
    const value = at(order, harmonic_rms_V, n);
    if (value === undefined) return ['-', '-'];
    // A harmonic smaller than the mesh's error in it is told by that bound alone.
    const bound = value * (at(order, harmonic_rms_V_rel_err, n) ?? 0);
    const sign = bound > value ? '<' : '';
    const told = Math.max(value, bound);
    const shown = (figure: number, digits: number): string =>
      sign + (sign === '' ? figure : Math.ceil(figure * 10 ** digits) / 10 ** digits).toFixed(digits); // no '<0.000'
    return [shown(told, 3), shown((100 * told) / fundamental_rms_V, 2)];
  };
  const orders = tellingOrders(emf);
  return {
    columns: [
      { name: 'order', unit: '' },
      { name: 'phase', unit: 'V rms' },
      { name: 'of first', unit: '%' },
      { name: 'line', unit: 'V rms' },
      { name: 'of first', unit: '%' },
      { name: 'winding factor', unit: '' },
    ],
    rows: orders.map((n) => {
      const factor = at(winding.order, winding.winding_factor, n);
      return [String(n), ...cells(emf.phase, n), ...cells(emf.line, n), factor === undefined ? '-' : factor.toFixed(4)];
    }),
    caption:
      (emf.end_corrected ? ENDS_TAKEN : SLICES_ALONE) +
      (orders.length < emf.phase.order.length ? `; orders above ${orders.at(-1)} stay below 0.01 % of the first` : ''),
  };
}

/** Orders up to the last that has at least 0.01 % of the fundamental, in phase or line. */
export function tellingOrders({ phase, line }: MachineResult['emf']): readonly number[] {
  const tells = ({ order, harmonic_rms_V, fundamental_rms_V }: VoltageResult, n: number): boolean =>
    (harmonic_rms_V[order.indexOf(n)] ?? 0) >= 1e-4 * fundamental_rms_V;
  const last = Math.max(1, ...phase.order.filter((n) => tells(phase, n) || tells(line, n)));
  return phase.order.filter((n) => n <= last);
}

function windingGroup({ winding: built }: Machine, { winding }: MachineResult): SheetGroup {
  return {
    heading: 'Winding',
    blocks: [
      rowsBlock([
        { label: 'Thickness', value: `${mm(winding.thickness_m)} mm` },
        { label: 'Fill factor', value: `${figure(winding.fill_factor, 3)} bare copper in the leg's section` },
        { label: 'Mean turn', value: `${mm(winding.mean_turn_m)} mm` },
        {
          label: 'Wire to wind',
          value: `${figure(winding.wire_length_m, 3)} m of each strand, ${figure(built.wire.strands * winding.wire_length_m, 3)} m in all`,
        },
        {
          label: 'Phase resistance',
          value: `${resistance(winding.phase_resistance_20C_ohm)} at 20 degC, ${resistance(winding.phase_resistance_hot_ohm)} at ${given(built.temperature)} degC`,
        },
        ...inductanceRows(winding),
        ...phaseRows(winding.phase_map),
      ]),
    ],
  };
}

function inductanceRows({
  self_inductance_H: self,
  mutual_inductance_H: mutual,
  phase_inductance_H: phase,
  phase_inductance_H_rel_err: error = 0,
  inductance_parts: parts,
}: MachineResult['winding']): SheetRow[] {
  if (self === undefined || mutual === undefined || phase === undefined || parts === undefined) return [];
  const { slices_H, end_turns_H, end_turns_band_H } = parts.phase;
  return [
    { label: 'Phase inductance', value: `${henry(phase)}, self less mutual`, note: meshError(error) },
    { label: '  by its legs', value: `${henry(slices_H)}, from the slices` },
    { label: '  by its end turns', value: henry(end_turns_H), note: `± ${henry(end_turns_band_H, 2)}, their model` },
    { label: 'Self, mutual', value: `${henry(self)}, ${henry(mutual)}` },
  ];
}

/** Which coils, counted round the machine, make each phase; a minus marks those connected the other way round. */
function phaseRows(map: MachineResult['winding']['phase_map']): SheetRow[] {
  const phases = [...new Set(map.map(({ phase }) => phase))].sort((a, b) => a - b);
  return phases.map((phase) => ({
    label: `Coils of phase ${phase}`,
    value: map.flatMap((coil, k) => (coil.phase === phase ? [`${coil.sense < 0 ? '-' : ''}${k + 1}`] : [])).join(' '),
    ...(map.some((coil) => coil.phase === phase && coil.sense < 0) && { note: 'minus: the other way round' }),
  }));
}

function meritGroup({ merit }: MachineResult): SheetGroup {
  return {
    heading: 'Merit',
    blocks: [
      rowsBlock([
        { label: 'Merit V^2/R, hot', value: power(merit.merit_W), note: meshError(merit.merit_W_rel_err) },
        {
          label: 'Line B^2 x thickness',
          value: `${figure(1000 * merit.line_B_squared_thickness_T2m)} T2 mm`,
          note: meshError(merit.line_B_squared_thickness_T2m_rel_err),
        },
      ]),
    ],
  };
}

function mechanicalGroup(result: MachineResult): SheetGroup {
  const { mechanical, masses } = result;
  const mass = (label: string, value: number | undefined): SheetRow[] =>
    value === undefined ? [] : [{ label, value: `${figure(value, 3)} kg` }];
  return {
    heading: 'Pull and masses',
    blocks: [
      rowsBlock([
        {
          label: 'Pull between the discs',
          value: force(mechanical.disc_pull_N),
          note: meshError(mechanical.disc_pull_N_rel_err),
        },
        ...mechanicalRows(result),
        ...mass('Magnets', masses.magnets_kg),
        ...mass('Copper', masses.copper_kg),
        ...mass('Steel', masses.steel_kg),
        ...mass('Resin, about', masses.resin_kg),
        ...costRows(result),
      ]),
    ],
  };
}
