import type { LoadRow, MachineResult } from '@gapwright/machine-models';
import { figure, force, given, mm, percent, power } from './figures.js';
import type { SheetGroup, SheetRow, SheetTable } from './sheet-parts.js';

/** What the machine does in service and what may go wrong: one group a subject, those without figures left out. */
export function serviceGroups(result: MachineResult): SheetGroup[] {
  return [loadGroup(result), heatGroup(result), faultGroup(result), magnetGroup(result)].filter(
    (group) => group !== undefined,
  );
}

function loadGroup({ load }: MachineResult): SheetGroup | undefined {
  if (load === undefined) return undefined;
  const rows: SheetRow[] = [
    ...(load.cut_in_rpm > 0 ? [{ label: 'Cut-in', value: `${figure(load.cut_in_rpm)} rpm` }] : []),
    { label: 'At', value: `${given(load.speed_rpm)} rpm` },
    ...deliveredRows(load),
    { label: 'Phase current', value: `${figure(load.phase_rms_A)} A rms${densityOf(load)}` },
    {
      label: 'Shaft',
      value: `${power(load.shaft_W)}, ${figure(load.torque_Nm)} Nm`,
      ...(load.electromagnetic_W > 0 && { note: `torque ripple ${percent(load.torque_ripple, 2)} peak to peak` }),
    },
    { label: 'Efficiency', value: percent(load.efficiency) },
    ...moverRows(load),
  ];
  return {
    heading: 'On its load',
    blocks: [
      { kind: 'rows', rows },
      { kind: 'table', ...speedTable(load.table) },
    ],
  };
}

const densityOf = ({ current_density_A_per_mm2: density }: LoadRow): string =>
  density === undefined ? '' : `, ${figure(density, 3)} A/mm2`;

function deliveredRows(load: LoadRow): SheetRow[] {
  if (load.dc_V !== undefined && load.dc_A !== undefined && load.dc_W !== undefined) {
    return [{ label: 'Delivered', value: `${figure(load.dc_A)} A at ${figure(load.dc_V)} V DC, ${power(load.dc_W)}` }];
  }
  return load.ac_W === undefined ? [] : [{ label: 'Delivered', value: `${power(load.ac_W)} AC` }];
}

function moverRows({ prime_mover: mover }: NonNullable<MachineResult['load']>): SheetRow[] {
  if (mover === undefined) return [];
  const stable = mover.points.filter(({ stable: holds }) => holds);
  const at = stable.map(({ speed_rpm, shaft_W }) => `${figure(speed_rpm)} rpm, ${power(shaft_W)}`).join('; ');
  return [{ label: 'Prime mover', value: at === '' ? mover.outcome : `${mover.outcome} at ${at}` }];
}

/** At most so many rows are printed; all stand in results.json. */
const PRINTED = 8;

function speedTable(table: readonly LoadRow[]): SheetTable {
  const every = Math.max(1, Math.ceil(table.length / PRINTED));
  const shown = table.filter((_, i) => (table.length - 1 - i) % every === 0);
  return {
    columns: [
      { name: 'speed', unit: 'rpm' },
      { name: 'delivered', unit: 'W' },
      { name: 'current', unit: shown.some(({ dc_A }) => dc_A !== undefined) ? 'A DC' : 'A rms' },
      { name: 'copper', unit: 'W' },
      { name: 'shaft', unit: 'W' },
      { name: 'torque', unit: 'Nm' },
      { name: 'efficiency', unit: '%' },
    ],
    rows: shown.map((row) => [
      figure(row.speed_rpm, 4),
      figure(row.dc_W ?? row.ac_W ?? 0, 4),
      figure(row.dc_A ?? row.phase_rms_A, 3),
      figure(row.copper_W, 3),
      figure(row.shaft_W, 4),
      figure(row.torque_Nm, 3),
      (100 * row.efficiency).toFixed(1),
    ]),
  };
}

function heatGroup({ losses, thermal }: MachineResult): SheetGroup {
  const watt = (label: string, value: number | undefined): SheetRow[] =>
    value === undefined ? [] : [{ label, value: power(value) }];
  const rows: SheetRow[] = [
    ...watt('Copper', losses.copper_W),
    ...watt('Eddies in the strands', losses.strand_eddy_W),
    ...watt('Rectifier', losses.rectifier_W || undefined), // none, no row
    ...watt('Cable', losses.cable_W || undefined),
    ...watt('Current in the delta', losses.circulation_W),
    ...watt('Bearings and windage', losses.rotation_W),
  ];
  if (thermal !== undefined) {
    const { winding_C: warm, winding_middle_C: middle = warm } = thermal;
    rows.push(
      {
        label: 'Winding',
        value:
          warm === undefined || middle === undefined
            ? 'runs away: more heat than it can give off'
            : `${figure(warm, 3)} degC, ${figure(middle, 3)} in its middle`,
        note: 'allow 30 % of the rise',
      },
      {
        label: 'For good',
        value: `${figure(thermal.continuous_A, 3)} A rms per phase, to ${given(thermal.limit_C)} degC`,
      },
    );
  }
  return { heading: 'Losses and heat', blocks: [{ kind: 'rows', rows }] };
}

function faultGroup({ faults }: MachineResult): SheetGroup | undefined {
  const rows: SheetRow[] = [];
  const { overspeed_dc_peak_V: peak, short_circuit_A: short, short_circuit_torque_Nm: torque = 0 } = faults;
  if (peak !== undefined)
    rows.push({ label: 'Load off, overspeed', value: `${figure(peak, 3)} V DC peak, magnets cold` });
  if (short !== undefined) {
    const first = faults.short_circuit_first_peak_A ?? 0;
    rows.push({
      label: 'Terminals joined',
      value: `${figure(short, 3)} A rms per phase, ${figure(first, 3)} A first peak, brakes ${figure(torque, 3)} Nm`,
    });
  }
  if (faults.greatest_brake_Nm !== undefined && faults.greatest_brake_rpm !== undefined) {
    const at = `${figure(faults.greatest_brake_Nm, 3)} Nm at ${figure(faults.greatest_brake_rpm, 3)} rpm`;
    rows.push({ label: 'Strongest brake', value: at });
  }
  return rows.length === 0 ? undefined : { heading: 'Faults', blocks: [{ kind: 'rows', rows }] };
}

function magnetGroup({ magnets }: MachineResult): SheetGroup | undefined {
  const { working_B_min_T: lowest, demagnetisation_margin: margin, demagnetisation_margin_short: short } = magnets;
  if (lowest === undefined) return undefined;
  const rows: SheetRow[] = [
    { label: 'Lowest working B', value: `${figure(lowest, 3)} T along the magnet, worst hundredth, no current` },
  ];
  if (margin !== undefined) {
    rows.push({ label: 'Margin to the knee', value: `${percent(margin, 2)} with the circuit open` });
  }
  if (short !== undefined) {
    rows.push({
      label: '  worst of all',
      value: `${percent(short, 2)}, ${magnets.worst_region ?? ''}, terminals joined`,
    });
  }
  return { heading: 'Magnets at work', blocks: [{ kind: 'rows', rows }] };
}

/** Rows on bending, retention and the pull on the way in. */
export function mechanicalRows({ mechanical }: MachineResult): SheetRow[] {
  const { disc_deflection_m: bend, clearance_left_m: left, magnet_retention_N: hold, jacking } = mechanical;
  const rows: SheetRow[] = [];
  if (jacking !== undefined && jacking.length > 2) {
    const [far, middle] = [jacking[0], jacking[Math.floor(jacking.length / 2)]];
    const at = ({ gap_m, pull_N }: (typeof jacking)[number]): string => `${figure(pull_N, 3)} N at ${mm(gap_m, 3)} mm`;
    rows.push({ label: 'Pull on the way in', value: `${at(far)}, ${at(middle)}` });
  }
  if (bend !== undefined) {
    const room = left === undefined ? '' : `; ${mm(left, 3)} mm of clearance left`;
    rows.push({ label: 'Rim of the disc bends', value: `${mm(bend, 3)} mm${room}` });
  }
  if (hold !== undefined) {
    const band = mechanical.band_tension_N;
    const tension = band === undefined ? '' : `, ${force(band)} in a band round all`;
    rows.push({ label: 'A magnet is flung by', value: `${force(hold)}${tension}` });
  }
  return rows;
}

/** Cost of the active material, where prices are given. */
export function costRows({ costs }: MachineResult): SheetRow[] {
  if (costs === undefined) return [];
  const { total, priced, currency, parts } = costs;
  const each = Object.entries(parts).map(([part, cost]) => `${part} ${cost.toFixed(2)}`);
  const sum = `${(total ?? priced).toFixed(2)} ${currency}`;
  return [{ label: 'Cost', value: `${sum}${total === undefined ? ' of what is priced' : ''} (${each.join(', ')})` }];
}
