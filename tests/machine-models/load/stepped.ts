import type { Source } from '../../../packages/machine-models/src/load/source.js';
import { evaluate } from '../../../packages/machine-models/src/waves/series.js';

/** Means over the last period of a run in small steps. */
export interface SteppedMeans {
  readonly dcMean: number;
  readonly dcSquare: number;
  readonly lineSquare: number;
  readonly phaseSquare: number;
  readonly electromagnetic: number;
}

/**
 * A machine on a bridge by small steps of time (backward Euler), knowing nothing of states, modes or symmetry: in each step
 * every phase is an EMF behind R + L/h, the node voltages of machine, cables and rails are one linear system, and of the 27
 * ways in which three terminals can be at the upper rail, the lower one or none, that one is taken whose currents and
 * voltages have the right signs. The star point, or the delta with the current round it, is in the system as it is.
 */
export function stepped(
  source: Source,
  dc: { readonly voltage: number; readonly resistance: number; readonly diodeDrop: number },
  rpm: number,
  periods: number,
  steps: number,
): SteppedMeans {
  const omega = (Math.PI * source.poles * rpm) / 60;
  const h = (2 * Math.PI) / (omega * steps);
  const inertia = source.phaseInductance / h;
  const impedance = source.phaseResistance + inertia;
  const ratio = rpm / source.referenceRpm;
  const drops = 2 * dc.diodeDrop;
  const isStar = source.connection === 'star';
  let currents = [0, 0, 0];
  let pattern = 0;
  const sums = { dcMean: 0, dcSquare: 0, lineSquare: 0, phaseSquare: 0, electromagnetic: 0 };
  for (let step = 1; step <= periods * steps; step++) {
    const theta = (2 * Math.PI * step) / steps;
    const emf = source.phases.map((phase) => ratio * evaluate(phase, theta));
    const drive = emf.map((e, k) => e + inertia * currents[k]);
    let found: { line: readonly number[]; phase: readonly number[]; dc: number } | undefined;
    for (let attempt = 0; attempt < 27 && found === undefined; attempt++) {
      const tried = (pattern + attempt) % 27;
      const signs = [tried % 3, Math.floor(tried / 3) % 3, Math.floor(tried / 9)].map((digit) => digit - 1);
      // unknowns: terminals 0..2, upper rail 3 (the lower one is nought), star point 4
      const rows: number[][] = [];
      // current out of terminal k as coefficients of the unknowns and a constant
      const phaseRow = (k: number): number[] => {
        const row = [0, 0, 0, 0, 0, drive[k] / impedance];
        row[k] -= 1 / impedance;
        row[isStar ? 4 : (k + 1) % 3] += 1 / impedance;
        return row;
      };
      const lineRow = (k: number): number[] => {
        if (isStar) return phaseRow(k);
        const other = phaseRow((k + 2) % 3);
        return phaseRow(k).map((value, i) => value - other[i]);
      };
      const lineRows = [0, 1, 2].map(lineRow);
      for (let k = 0; k < 3; k++) {
        const row = lineRows[k].map((value) => (signs[k] === 0 ? value : -source.cableResistance * value));
        if (signs[k] === 0) {
          row[k] -= 1e-9;
          row[3] += 0.5e-9;
        } else {
          row[k] += 1;
          if (signs[k] > 0) row[3] -= 1;
        }
        rows.push(row);
      }
      const rail = [0, 0, 0, 1, 0, -dc.voltage - drops];
      for (let k = 0; k < 3; k++) {
        if (signs[k] > 0)
          lineRows[k].forEach((value, i) => {
            rail[i] -= dc.resistance * value;
          });
      }
      rows.push(rail);
      const point = [0, 0, 0, 0, 0, 0];
      if (isStar) {
        for (const row of lineRows)
          row.forEach((value, i) => {
            point[i] += value;
          });
      } else point[4] = 1;
      rows.push(point);
      const unknowns = solve(rows);
      const at = (row: readonly number[]): number => row[5] + unknowns.reduce((sum, x, i) => sum + row[i] * x, 0);
      const line = lineRows.map(at);
      const right = signs.every((sign, k) => {
        if (sign !== 0) return sign * line[k] >= -1e-9;
        return unknowns[k] >= -1e-6 && unknowns[k] <= unknowns[3] + 1e-6;
      });
      if (!right) continue;
      pattern = tried;
      found = {
        line,
        phase: [0, 1, 2].map((k) => at(phaseRow(k))),
        dc: line.reduce((sum, i, k) => sum + (signs[k] > 0 ? i : 0), 0),
      };
    }
    if (found === undefined) throw new Error('no pattern of diodes fits');
    currents = [...found.phase];
    if (step <= (periods - 1) * steps) continue;
    sums.dcMean += found.dc / steps;
    sums.dcSquare += found.dc ** 2 / steps;
    sums.lineSquare += found.line.reduce((sum, i) => sum + i * i, 0) / 3 / steps;
    sums.phaseSquare += found.phase.reduce((sum, i) => sum + i * i, 0) / 3 / steps;
    sums.electromagnetic += found.phase.reduce((sum, i, k) => sum + i * emf[k], 0) / steps;
  }
  return sums;
}

/** The error of backward Euler is proportional to the step; two runs take it away. */
export function extrapolated(...args: Parameters<typeof stepped>): SteppedMeans {
  const [source, dc, rpm, periods, steps] = args;
  const coarse = stepped(source, dc, rpm, periods, steps);
  const fine = stepped(source, dc, rpm, periods, 2 * steps);
  const better = (key: keyof SteppedMeans): number => 2 * fine[key] - coarse[key];
  return {
    dcMean: better('dcMean'),
    dcSquare: better('dcSquare'),
    lineSquare: better('lineSquare'),
    phaseSquare: better('phaseSquare'),
    electromagnetic: better('electromagnetic'),
  };
}

/** Elimination with the largest pivot; rows are coefficients and a constant:  sum + constant = 0. */
function solve(rows: number[][]): readonly number[] {
  const n = rows.length;
  for (let i = 0; i < n; i++) {
    let best = i;
    for (let j = i + 1; j < n; j++) if (Math.abs(rows[j][i]) > Math.abs(rows[best][i])) best = j;
    [rows[i], rows[best]] = [rows[best], rows[i]];
    for (let j = i + 1; j < n; j++) {
      const factor = rows[j][i] / rows[i][i];
      if (factor !== 0) for (let k = i; k <= n; k++) rows[j][k] -= factor * rows[i][k];
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let i = n - 1; i >= 0; i--) {
    let sum = -rows[i][n];
    for (let k = i + 1; k < n; k++) sum -= rows[i][k] * x[k];
    x[i] = sum / rows[i][i];
  }
  return x;
}
