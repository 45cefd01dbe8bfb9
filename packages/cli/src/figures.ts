/** `value` with about `digits` significant digits and no exponent; '0' for zero. Large whole parts are kept whole. */
export function figure(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return '-';
  if (value === 0) return '0';
  const rounded = Number(value.toPrecision(digits));
  const magnitude = Math.floor(Math.log10(Math.abs(rounded)));
  if (magnitude < -6 || magnitude > 8) return value.toExponential(digits - 1);
  return value.toFixed(Math.max(0, digits - 1 - magnitude));
}

/** As `figure`, without zeros at the end: for what the user gave. */
export const given = (value: number, digits = 6): string => String(Number(value.toPrecision(digits)));

/** Millimetres of a length in metres. */
export const mm = (metres: number, digits = 4): string => figure(1000 * metres, digits);
export const givenMm = (metres: number): string => given(1000 * metres);

/** Ohm or milliohm, whichever reads better. */
export function resistance(ohm: number): string {
  return Math.abs(ohm) < 1 ? `${figure(1000 * ohm)} mohm` : `${figure(ohm)} ohm`;
}

/** Watt or kilowatt. */
export function power(watt: number): string {
  return Math.abs(watt) < 1e4 ? `${figure(watt)} W` : `${figure(watt / 1000)} kW`;
}

/** A force in N and in kgf, as hands and jacking screws know it. */
export const force = (newton: number): string => `${figure(newton, 3)} N (${figure(newton / 9.80665, 3)} kgf)`;

/** What the mesh leaves open of a figure: `± 0.05 %`. */
export const meshError = (relative: number): string => `± ${figure(100 * relative, 2)} %`;

export const percent = (share: number, digits = 3): string => `${figure(100 * share, digits)} %`;

/** Millihenry or microhenry, whichever reads better. */
export const henry = (value: number, digits = 4): string =>
  Math.abs(value) < 1e-4 ? `${figure(1e6 * value, digits)} uH` : `${figure(1e3 * value, digits)} mH`;
