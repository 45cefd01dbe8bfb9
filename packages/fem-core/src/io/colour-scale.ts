/**
 * Colours of the flux density map, from no field to the end of the scale: lightness falls steadily while the hue goes
 * from straw over orange and rose to violet, so that the order survives grey printing and colour blindness, and black
 * lines stay visible on all of them.
 */
const table: readonly (readonly [red: number, green: number, blue: number])[] = [
  [252, 250, 240],
  [250, 236, 196],
  [250, 215, 149],
  [248, 189, 118],
  [243, 160, 107],
  [231, 131, 112],
  [212, 106, 124],
  [186, 87, 139],
  [154, 75, 151],
  [119, 68, 156],
];

/** The colour at `share` (0 to 1) of the scale, as #rrggbb. */
export function scaleColour(share: number): string {
  const place = Math.max(0, Math.min(1, share)) * (table.length - 1);
  const k = Math.min(Math.floor(place), table.length - 2);
  const mix = (channel: number): string =>
    Math.round(table[k][channel] + (place - k) * (table[k + 1][channel] - table[k][channel]))
      .toString(16)
      .padStart(2, '0');
  return `#${mix(0)}${mix(1)}${mix(2)}`;
}

/** The least of 1, 2, 5, 10, ... times a power of ten that is `least` or more (`least` > 0). */
export function niceStep(least: number): number {
  const power = Math.floor(Math.log10(least));
  for (const factor of [1, 2, 5]) {
    // Dividing by a whole power of ten keeps 0.2 the double nearest to 0.2.
    const step = power < 0 ? factor / 10 ** -power : factor * 10 ** power;
    if (step >= least * (1 - 1e-9)) return step;
  }
  return power + 1 < 0 ? 1 / 10 ** -(power + 1) : 10 ** (power + 1);
}

/** Decimals that write whole multiples of `step` in full. */
export const decimalsOf = (step: number): number => Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
