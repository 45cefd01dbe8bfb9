import type { Warning } from '../machine.js';
import { KEEP } from './judge-magnet.js';
import type { JudgedMagnet, MagnetState } from './judged-magnet.js';

const KEY = 'magnets.demagnetisation_margin';

/** What there is to tell of magnets near their knee, past it, or without a known one; the worst magnet of each material. */
export function demagnetisationWarnings(magnets: readonly JudgedMagnet[]): readonly Warning[] {
  const materials = [...new Set(magnets.map(({ material }) => material))];
  return materials.flatMap((material) => {
    const own = magnets.filter((magnet) => magnet.material === material);
    return [...unknown(material, own), ...lacking(own)];
  });
}

function unknown(material: string, magnets: readonly JudgedMagnet[]): Warning[] {
  const states = magnets.flatMap((magnet) => magnet.states).filter(({ margin }) => margin === undefined);
  if (states.length === 0) return [];
  const text =
    `left out for ${material}: its coercivity at ${figure(states[0].celsius)} degC is not known; give coercivity_intrinsic and ` +
    'coercivity_slope, or its curve';
  return [{ key: KEY, text }];
}

function lacking(magnets: readonly JudgedMagnet[]): Warning[] {
  const known = magnets.flatMap((magnet) => (magnet.worst.margin === undefined ? [] : [magnet]));
  if (known.length === 0) return [];
  const magnet = known.reduce((a, b) => ((b.worst.margin ?? 1) < (a.worst.margin ?? 1) ? b : a));
  const { worst, limit, betterGrades, material, region } = magnet;
  const margin = worst.margin ?? 1;
  if (margin >= KEEP) return [];
  const open = magnet.states.some(({ circuit, margin: one }) => circuit === 'open' && one !== undefined && one < KEEP);
  const when = `${worst.circuit === 'short' ? 'under a short circuit ' : ''}at ${figure(worst.celsius)} degC`;
  const only = worst.circuit === 'short' && !open ? ' (with the circuit open it has room enough)' : '';
  const told =
    margin < 0
      ? `${material} is driven past its knee ${when}${only} and loses strength for good: |H| is ${percent(1 - margin)} % of what it bears`
      : `${material} works near its knee ${when}${only}: |H| is ${percent(1 - margin)} % of what it bears, where 90 % is sound`;
  const ways = [
    ...(limit === undefined
      ? []
      : [`it keeps a tenth of room ${limit.by === 'heat' ? 'up' : 'down'} to ${figure(limit.celsius)} degC`]),
    ...(betterGrades.length === 0
      ? ['no grade of its family in the library would do']
      : [`${betterGrades.join(', ')} would do`]),
  ];
  return [{ key: KEY, text: `${told}; worst in the ${region}, ${place(worst)}; ${ways.join('; ')}` }];
}

const place = ({ radius, x, y }: MagnetState): string =>
  `slice at ${figure(1000 * radius)} mm, x ${figure(1000 * x)} mm, y ${figure(1000 * y)} mm`;

const figure = (value: number): string => String(Number(value.toFixed(1)));
const percent = (share: number): string => (100 * share).toFixed(0);
