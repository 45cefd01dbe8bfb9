import { type LibraryMaterial, type MaterialResult, materialFigures } from '@gapwright/machine-models';
import pc from 'picocolors';
import { figure, given } from './figures.js';
import { cutText, plainText } from './plain-text.js';

/** Materials under a heading, of any kinds. */
export interface ListGroup {
  readonly heading: string;
  readonly materials: Readonly<Record<string, LibraryMaterial>>;
}

type Kind = MaterialResult['kind'];
type Line = readonly string[];

const NAME = 22;

const HEADS: Readonly<Record<Kind, readonly Line[]>> = {
  nonmagnetic: [['', 'kg/m3']],
  steel: [['', 'mu_r', 'kg/m3']],
  'steel-curve': [
    ['', 'mu_r', 'mu_r', 'at', 'J at end', 'density'],
    ['', 'first', 'most', 'T', 'T', 'kg/m3'],
  ],
  magnet: [
    ['', 'remanence', 'range', 'slope', 'recoil', 'coercivity', 'slope', 'up to', 'density'],
    ['', 'T', 'T', '%/K', '', 'kA/m', '%/K', 'degC', 'kg/m3'],
  ],
};

/** The library as a table a group, aligned; names at the left, figures at the right of their columns. */
export function materialsText(groups: readonly ListGroup[], colour: boolean): string {
  const { bold, dim } = pc.createColors(colour);
  const lines = groups.flatMap(({ heading, materials }) => {
    const results = Object.entries(materials).map(([name, material]) => materialFigures(name, material));
    const kinds = (['nonmagnetic', 'steel', 'steel-curve', 'magnet'] as const).filter((kind) =>
      results.some((result) => result.kind === kind),
    );
    const tables = kinds.flatMap((kind) => {
      const rows = results.filter((result) => result.kind === kind).map(cells);
      const [head, body] = [HEADS[kind], align([...HEADS[kind], ...rows])];
      return [...body.slice(0, head.length).map(dim), ...body.slice(head.length)];
    });
    return [bold(plainText(heading)), ...tables, ''];
  });
  return `${lines.join('\n')}\ngapwright materials NAME shows curve, source and all figures of one.\n`;
}

function cells(result: MaterialResult): Line {
  const name = cutText(plainText(result.name), 40);
  const density = optional(result.density_kg_per_m3, given);
  switch (result.kind) {
    case 'nonmagnetic':
      return [name, density];
    case 'steel':
      return [name, given(result.mu_r), density];
    case 'steel-curve': {
      const { mu_r_first, mu_r_highest, mu_r_highest_B_T, last_polarisation_T } = result;
      const whole = (value: number): string => Math.round(value).toFixed(0);
      return [
        name,
        whole(mu_r_first),
        whole(mu_r_highest),
        mu_r_highest_B_T.toFixed(2),
        figure(last_polarisation_T, 3),
        density,
      ];
    }
    case 'magnet': {
      const { remanence_range_T: range } = result;
      const percent = (slope: number): string => given(100 * slope);
      return [
        name,
        figure(result.remanence_T, 4),
        range === undefined ? '-' : [...new Set(range)].map((value) => figure(value, 3)).join('-'),
        percent(result.remanence_slope_per_K),
        given(result.recoil),
        optional(result.coercivity_intrinsic_A_per_m, (value) => given(value / 1000)),
        optional(result.coercivity_slope_per_K, percent),
        optional(result.highest_temperature_C, given),
        density,
      ];
    }
  }
}

function optional(value: number | undefined, show: (value: number) => string): string {
  return value === undefined ? '-' : show(value);
}

function align(rows: readonly Line[]): string[] {
  const widths = rows[0].map((_, c) => Math.max(...rows.map((row) => [...row[c]].length)));
  return rows.map((row) =>
    row
      .map((cell, c) => (c === 0 ? `  ${cell.padEnd(Math.max(NAME, widths[0]))}` : cell.padStart(widths[c])))
      .join('  ')
      .trimEnd(),
  );
}
