import type { MagnetAtResult, MaterialResult } from '@gapwright/machine-models';
import { figure, given } from './figures.js';
import { plainText } from './plain-text.js';
import type { Sheet, SheetBlock, SheetRow } from './sheet-parts.js';

/** All figures of one material, a magnet's also by temperature. */
export function materialSheet(
  figures: MaterialResult,
  group: string,
  at: readonly MagnetAtResult[],
  warnings: readonly string[],
): Sheet {
  const density = figures.density_kg_per_m3;
  const rows: SheetRow[] = [
    { label: 'Kind', value: plainText(group) },
    ...rowsOf(figures),
    ...(density === undefined ? [] : [{ label: 'Density', value: `${given(density)} kg/m3` }]),
    { label: 'Source', value: plainText(figures.source) },
  ];
  return {
    title: plainText(figures.name),
    groups: [
      { heading: 'Figures', blocks: [{ kind: 'rows', rows }] },
      ...(at.length === 0 ? [] : [{ heading: 'At temperature', blocks: [temperatures(at)] }]),
    ],
    warnings: warnings.map(plainText),
    cautions: [],
  };
}

function rowsOf(figures: MaterialResult): SheetRow[] {
  switch (figures.kind) {
    case 'nonmagnetic':
      return [{ label: 'Relative permeability', value: '1' }];
    case 'steel':
      return [{ label: 'Relative permeability', value: `${given(figures.mu_r)}, without saturation` }];
    case 'steel-curve': {
      const { mu_r_first, mu_r_highest, mu_r_highest_B_T, last_H_A_per_m, last_B_T, last_polarisation_T } = figures;
      return [
        {
          label: 'Relative permeability',
          value: `${figure(mu_r_first, 3)} at first, ${figure(mu_r_highest, 3)} at most, at ${figure(mu_r_highest_B_T, 3)} T`,
        },
        {
          label: 'End of the table',
          value: `${figure(last_B_T)} T at ${figure(last_H_A_per_m / 1000, 3)} kA/m, polarisation ${figure(last_polarisation_T)} T; slope mu0 beyond`,
        },
      ];
    }
    case 'magnet': {
      const { remanence_range_T: range, coercivity_intrinsic_A_per_m: coercivity } = figures;
      const { coercivity_slope_per_K: slope, highest_temperature_C: highest } = figures;
      const within =
        range === undefined || range[0] === range[1]
          ? ''
          : `, the grade may have ${figure(range[0], 3)} to ${figure(range[1], 3)} T`;
      return [
        { label: 'Remanence', value: `${figure(figures.remanence_T)} T at 20 degC${within}` },
        { label: 'Its slope', value: perKelvin(figures.remanence_slope_per_K) },
        { label: 'Recoil permeability', value: given(figures.recoil) },
        {
          label: 'Intrinsic coercivity',
          value: coercivity === undefined ? 'not known' : `${given(coercivity / 1000)} kA/m at 20 degC`,
        },
        ...(slope === undefined ? [] : [{ label: 'Its slope', value: perKelvin(slope) }]),
        { label: 'Energy product', value: `${figure(figures.energy_product_J_per_m3 / 1000)} kJ/m3` },
        ...(highest === undefined
          ? []
          : [{ label: 'Highest temperature', value: `${given(highest)} degC usually, in a good circuit` }]),
      ];
    }
  }
}

export const perKelvin = (slope: number): string => `${given(100 * slope)} %/K`;

function temperatures(at: readonly MagnetAtResult[]): SheetBlock {
  const kilo = (value: number | undefined): string => (value === undefined ? '-' : figure(value / 1000));
  return {
    kind: 'table',
    columns: [
      { name: 'at', unit: 'degC' },
      { name: 'remanence', unit: 'T' },
      { name: 'intrinsic coercivity', unit: 'kA/m' },
      { name: 'normal coercivity', unit: 'kA/m' },
      { name: 'energy product', unit: 'kJ/m3' },
      { name: 'knee H', unit: 'kA/m' },
      { name: 'knee B', unit: 'T' },
    ],
    rows: at.map((row) => [
      given(row.temperature_C),
      figure(row.remanence_T),
      kilo(row.coercivity_intrinsic_A_per_m),
      kilo(row.coercivity_A_per_m),
      kilo(row.energy_product_J_per_m3),
      kilo(row.knee_H_A_per_m),
      row.knee_B_T === undefined ? '-' : figure(row.knee_B_T),
    ]),
    caption:
      'knee: past it a magnet stays weaker; without a measured curve it is where the recoil line meets the intrinsic ' +
      'coercivity, and real curves bend before: keep a margin',
  };
}
