import type { SectionResult } from '@gapwright/machine-models';

const COLUMNS = ['s_m', 'x_m', 'y_m', 'A_Wb_per_m', 'Bx_T', 'By_T', 'B_T', 'Hx_A_per_m', 'Hy_A_per_m'] as const;

/** All line probes as one table of comma-separated values, a row a point, the probe's name first; empty where no field is. */
export function linesCsv({ probes }: SectionResult): string {
  const rows = probes.flatMap((probe) => {
    if (probe.kind !== 'line') return [];
    const name = quoted(probe.name);
    return probe.s_m.map((_, i) => [name, ...COLUMNS.map((key) => shortNumber(probe[key][i]))].join(','));
  });
  return `${[['line', ...COLUMNS].join(','), ...rows].join('\n')}\n`;
}

/** As RFC 4180 wants it. */
const quoted = (text: string): string => (/[",]|^\s|\s$/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);

/** Nine digits: far beyond the mesh's error, short enough to read. */
const shortNumber = (value: number): string => (Number.isFinite(value) ? String(Number(value.toPrecision(9))) : '');
