import type { MachineResult } from '@gapwright/machine-models';

/** The waveforms of one electrical period as comma-separated values: a head line, then a line an angle. */
export function waveformsCsv(result: MachineResult): string {
  const { electrical_deg, phase_V, line_V, rectified_V } = result.emf.waveform;
  const lines = electrical_deg.map((angle, k) =>
    [angle, phase_V[k], line_V[k], rectified_V[k]].map(shortNumber).join(','),
  );
  return `${['electrical_deg,phase_V,line_V,rectified_V', ...lines].join('\n')}\n`;
}

/** Nine digits: far beyond the mesh's error, short enough to read. */
const shortNumber = (value: number): string => String(Number(value.toPrecision(9)));
