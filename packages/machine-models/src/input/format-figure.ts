/** From the rounding of decimal fractions: sizes (m) or ratios that differ by less are equal. */
export const HAIR = 1e-9;

/** '12.35 mm': four digits, to the nearest. */
export function millimetres(metres: number): string {
  return `${round(metres * 1000, Math.round)} mm`;
}

/** As `millimetres`, never more than the value: for a size that must not be passed. */
export function atMostMillimetres(metres: number): string {
  return `${round(metres * 1000, Math.floor)} mm`;
}

/** As `millimetres`, never less than the value: for a size that must be reached. */
export function atLeastMillimetres(metres: number): string {
  return `${round(metres * 1000, Math.ceil)} mm`;
}

/** Four digits. */
export function figure(value: number): string {
  return String(round(value, Math.round));
}

function round(value: number, how: (x: number) => number): number {
  if (value === 0 || !Number.isFinite(value)) return value;
  // A hair's breadth of 1e-9 keeps 15.000000000000002 at 15.
  const scale = 10 ** (3 - Math.floor(Math.log10(Math.abs(value))));
  const nearest = Math.round(value * scale);
  const whole = Math.abs(value * scale - nearest) < 1e-5 ? nearest : how(value * scale);
  return scale >= 1 ? whole / scale : whole * Math.round(1 / scale);
}
