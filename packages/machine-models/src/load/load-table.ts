import { figure } from '../input/format-figure.js';
import type { Load, Warning } from '../machine.js';
import { drivePoint, resistorPoint } from './ac-loads.js';
import { bridgePoint } from './bridge.js';
import type { LoadPoint } from './load-point.js';
import { cutInSpeed, type Source } from './source.js';

/** The machine on its load at one speed. */
export function loadPoint(source: Source, load: Load, rpm: number): LoadPoint {
  switch (load.kind) {
    case 'bridge':
      return bridgePoint(source, load, rpm);
    case 'resistor':
      return resistorPoint(source, load.resistance, rpm);
    case 'drive':
      return drivePoint(source, load.current, rpm);
  }
}

/** Speed at which the load begins to take current, rpm; 0 for loads that take some at any speed. */
export function loadCutIn(source: Source, load: Load): number {
  if (load.kind !== 'bridge') return 0;
  return cutInSpeed(source, 'voltage' in load ? load.voltage : 0, load.diodeDrop);
}

/** The machine at many speeds, and on a bus at many voltages. */
export interface LoadTable {
  /** rpm, 0 where current flows at any speed. */
  readonly cut_in_rpm: number;
  /** Rising in speed, on the load as it is. */
  readonly rows: readonly LoadPoint[];
  /** A bridge on a bus alone: the same speeds at other voltages of the bus, rising. */
  readonly buses: readonly {
    readonly voltage_V: number;
    readonly cut_in_rpm: number;
    readonly rows: readonly LoadPoint[];
  }[];
}

/** Of the bus voltage: about what a battery runs through, and somewhat more. */
const BUS_SHARES: readonly number[] = [0.8, 0.9, 1.1, 1.2];

const SPEEDS = 12;

/**
 * From cut-in to `highestRpm` in even steps, with the working speed among them.
 *
 * @param highestRpm overspeed, as a rule
 * @param shares bus voltages to look at beside the given one, over it
 */
export function loadTable(
  source: Source,
  load: Load,
  speedRpm: number,
  highestRpm: number,
  shares: readonly number[] = BUS_SHARES,
): LoadTable {
  const cutIn = loadCutIn(source, load);
  const speeds = tableSpeeds(cutIn, speedRpm, Math.max(speedRpm, highestRpm));
  const rows = speeds.map((rpm) => loadPoint(source, load, rpm));
  if (load.kind !== 'bridge' || !('voltage' in load)) return { cut_in_rpm: cutIn, rows, buses: [] };
  const buses = shares.map((share) => {
    const bus = { ...load, voltage: share * load.voltage };
    const from = loadCutIn(source, bus);
    return { voltage_V: bus.voltage, cut_in_rpm: from, rows: speeds.map((rpm) => loadPoint(source, bus, rpm)) };
  });
  return { cut_in_rpm: cutIn, rows, buses };
}

/** `SPEEDS` even steps up from cut-in (the first row is a step above it), and the working speed; rising. */
function tableSpeeds(cutIn: number, speed: number, highest: number): readonly number[] {
  const lowest = Math.min(cutIn, highest);
  const even = Array.from({ length: SPEEDS }, (_, i) => lowest + ((highest - lowest) * (i + 1)) / SPEEDS);
  const kept = lowest < highest ? even.filter((rpm) => Math.abs(rpm - speed) > 1e-9 * speed) : [];
  return [...kept, speed].sort((a, b) => a - b);
}

/** What the reader of an operating point must know. */
export function loadWarnings({ cut_in_rpm }: Pick<LoadTable, 'cut_in_rpm'>, point: LoadPoint): readonly Warning[] {
  const found: Warning[] = [];
  if (point.below_cut_in) {
    found.push({
      key: 'operation.speed',
      text:
        `below cut-in: at ${figure(point.speed_rpm)} rpm the rectified voltage stays under that of the DC side and the diodes, ` +
        `so no current flows; it begins at ${figure(cut_in_rpm)} rpm`,
    });
  }
  if (!point.converged) {
    found.push({
      key: 'load',
      text: 'the currents at the bridge were not found to be periodic; figures of the load are those of the last try',
    });
  }
  return found;
}
