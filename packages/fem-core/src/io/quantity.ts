import { listWords, showText, showValue } from './show.js';

/**
 * value in the base unit = (number + shift) x times / per. A fraction of whole numbers wherever the unit allows: then
 * `12 mm` is the double nearest to 0.012, as if it had been written in metres.
 */
type Unit = readonly [times: number, per: number, shift?: number];

interface Units {
  /** 'a length' */
  readonly noun: string;
  /** A bare number is understood, in the base unit. */
  readonly bare?: true;
  /** The first one is the base unit: what a value is in, inside. */
  readonly units: Readonly<Record<string, Unit>>;
}

/** Base units are SI, but for temperatures (degC) and rotational speeds (rpm), which the trade and our keys keep. */
const DIMENSIONS = {
  length: {
    noun: 'a length',
    units: {
      m: [1, 1],
      mm: [1, 1000],
      cm: [1, 100],
      um: [1, 1e6],
      km: [1000, 1],
      in: [254, 1e4],
      ft: [3048, 1e4],
      mil: [254, 1e7],
    },
  },
  area: {
    noun: 'an area',
    units: { m2: [1, 1], mm2: [1, 1e6], cm2: [1, 1e4], in2: [64516, 1e8] },
  },
  angle: { noun: 'an angle', units: { rad: [1, 1], deg: [Math.PI, 180] } },
  ratio: { noun: 'a share', bare: true, units: { '1': [1, 1], '%': [1, 100], ppm: [1, 1e6] } },
  perKelvin: { noun: 'a change per kelvin', units: { '1/K': [1, 1], '%/K': [1, 100], 'ppm/K': [1, 1e6] } },
  temperature: { noun: 'a temperature', units: { degC: [1, 1], degF: [5, 9, -32], K: [1, 1, -273.15] } },
  rotation: { noun: 'a speed of rotation', units: { rpm: [1, 1], 'rad/s': [30, Math.PI], 'rev/s': [60, 1] } },
  velocity: { noun: 'a velocity', units: { 'm/s': [1, 1], 'km/h': [10, 36], 'ft/s': [3048, 1e4], kn: [1852, 3600] } },
  fluxDensity: { noun: 'a flux density', units: { T: [1, 1], mT: [1, 1000], G: [1, 1e4], kG: [1, 10] } },
  fieldStrength: {
    noun: 'a field strength',
    units: { 'A/m': [1, 1], 'kA/m': [1000, 1], 'MA/m': [1e6, 1], Oe: [1000, 4 * Math.PI], kOe: [1e6, 4 * Math.PI] },
  },
  current: { noun: 'a current', units: { A: [1, 1], mA: [1, 1000], kA: [1000, 1] } },
  currentDensity: {
    noun: 'a current density',
    units: { 'A/m2': [1, 1], 'A/mm2': [1e6, 1], 'A/cm2': [1e4, 1] },
  },
  voltage: { noun: 'a voltage', units: { V: [1, 1], mV: [1, 1000], kV: [1000, 1] } },
  resistance: { noun: 'a resistance', units: { ohm: [1, 1], mohm: [1, 1000], uohm: [1, 1e6], kohm: [1000, 1] } },
  inductance: { noun: 'an inductance', units: { H: [1, 1], mH: [1, 1000], uH: [1, 1e6] } },
  power: { noun: 'a power', units: { W: [1, 1], kW: [1000, 1], mW: [1, 1000] } },
  torque: { noun: 'a torque', units: { Nm: [1, 1], mNm: [1, 1000], kNm: [1000, 1], 'lbf.ft': [1.3558179483314, 1] } },
  dragFactor: { noun: 'a torque per speed squared', units: { 'Nm.s2': [1, 1] } },
  density: { noun: 'a density', units: { 'kg/m3': [1, 1], 'g/cm3': [1000, 1], 'lb/in3': [45359237, 1638.7064] } },
  heatTransfer: { noun: 'a heat transfer coefficient', units: { 'W/m2K': [1, 1] } },
} as const satisfies Record<string, Units>;

/** What a quantity measures. */
export type Dimension = keyof typeof DIMENSIONS;

/** Other spellings, after `tidyUnit`. */
const SPELLINGS: Readonly<Record<string, string>> = {
  inch: 'in',
  '"': 'in',
  thou: 'mil',
  degrees: 'deg',
  C: 'degC',
  F: 'degF',
  '%/degC': '%/K',
  '1/degC': '1/K',
  '/K': '1/K',
  '1/min': 'rpm',
  'r/min': 'rpm',
  Ohm: 'ohm',
  'N.m': 'Nm',
  'ft.lbf': 'lbf.ft',
  'N.m.s2': 'Nm.s2',
  Nms2: 'Nm.s2',
  'W/m2.K': 'W/m2K',
  'W/m2/K': 'W/m2K',
  gauss: 'G',
};

/** Beyond this a number is taken for a slip, whatever it measures. */
const LARGEST = 1e15;

/** A number and, after an optional space, whatever follows; a decimal point, an exponent allowed. */
const NUMBER = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*(.*)$/s;

/** What is wrong with a text, and what would do. */
export interface Misreading {
  /** Such as 'needs a unit, got 12'. */
  readonly wrong: string;
  /** Such as 'give a length in mm'. */
  readonly remedy: string;
}

/**
 * Reads a number with its unit: `12 mm`, `12mm`, `1e-3 T`, `-0.12 %/K`.
 *
 * Units may be written with `^2` or a raised 2, a dot or a raised dot, the signs for ohm, micro and degree. A number
 * without a unit is refused unless the dimension is a ratio, and so is anything that is not finite or beyond 1e15.
 *
 * @param text  as the file has it; YAML makes bare numbers of what has no unit
 * @returns the value in SI units (temperatures in degC, rotation in rpm), or what is wrong
 */
export function parseQuantity(text: string | number, dimension: Dimension): { readonly value: number } | Misreading {
  const split = splitQuantity(text);
  if ('wrong' in split) return split;
  const { noun, bare, units }: Units = DIMENSIONS[dimension];
  const names = listWords(Object.keys(units).filter((name) => name !== '1'));
  const wanted = bare ? 'a bare number' : noun;
  const remedy = bare ? `give ${wanted}, or one in ${names}` : `give ${wanted} in ${names}`;
  if (split.unit === '') {
    if (bare) return toBase(split.number, [1, 1], text);
    return { wrong: `needs a unit, got ${showValue(text)}`, remedy };
  }
  if (Object.hasOwn(units, split.unit)) return toBase(split.number, units[split.unit], text);
  const other = dimensionOf(split.unit);
  const why = other === undefined ? 'is not a known unit' : `is a unit of ${withoutArticle(DIMENSIONS[other].noun)}`;
  return { wrong: `must be ${wanted}, got ${showValue(text)}, but ${showText(split.unit)} ${why}`, remedy };
}

/**
 * Reads a number with any known unit, or a bare one (a ratio).
 * @returns the value in SI units (temperatures in degC, rotation in rpm) and what it measures, or what is wrong
 */
export function parseAnyQuantity(
  text: string | number,
): { readonly value: number; readonly dimension: Dimension } | Misreading {
  const split = splitQuantity(text);
  if ('wrong' in split) return split;
  const dimension = split.unit === '' ? 'ratio' : dimensionOf(split.unit);
  if (dimension === undefined) {
    return { wrong: `must be a number with a unit, got ${showValue(text)}`, remedy: 'give for example 0.3 mm or 2 %' };
  }
  const reading = parseQuantity(text, dimension);
  return 'wrong' in reading ? reading : { value: reading.value, dimension };
}

/**
 * Reads a price for a weight, `14 EUR/kg`; the currency is any code of three capitals (ISO 4217 form).
 * @returns the price of a kilogram and its currency, or what is wrong
 */
export function parsePrice(
  text: string | number,
): { readonly perKilogram: number; readonly currency: string } | Misreading {
  const split = splitQuantity(text);
  if ('wrong' in split) return split;
  const [, currency, weight] = /^([A-Z]{3})\/(kg|g|lb|t)$/.exec(split.unit) ?? [];
  if (currency === undefined) {
    return {
      wrong: `must be a price for a weight, got ${showValue(text)}`,
      remedy: 'give a currency of three capitals per kg, g, lb or t, for example 14 EUR/kg',
    };
  }
  const perWeight: Readonly<Record<string, Unit>> = { kg: [1, 1], g: [1000, 1], lb: [1, 0.45359237], t: [1, 1000] };
  const reading = toBase(split.number, perWeight[weight], text);
  return 'wrong' in reading ? reading : { perKilogram: reading.value, currency };
}

function splitQuantity(text: string | number): { readonly number: number; readonly unit: string } | Misreading {
  if (typeof text === 'number') return { number: text, unit: '' };
  const [, number, unit] = NUMBER.exec(text.trim().replace('\u2212', '-')) ?? [];
  if (number === undefined) {
    return {
      wrong: `must start with a number, got ${showValue(text)}`,
      remedy: 'give a number, with its unit where it has one',
    };
  }
  if (/^,\d/.test(unit)) {
    return {
      wrong: `has a comma in the number: ${showValue(text)}`,
      remedy: `write ${showText(text.replace(',', '.'))}`,
    };
  }
  return { number: Number(number), unit: tidyUnit(unit) };
}

/** One spelling for the many ways to set a unit in type. */
function tidyUnit(unit: string): string {
  const tidy = unit
    .replace(/\s+|[()^]/g, '')
    .replace(/\u00b2/g, '2')
    .replace(/\u00b3/g, '3')
    .replace(/[*\u00b7\u22c5]/g, '.')
    .replace(/[\u00b5\u03bc]/g, 'u')
    .replace(/[\u03a9\u2126]/g, 'ohm')
    .replace(/\u00b0/g, 'deg');
  return Object.hasOwn(SPELLINGS, tidy) ? SPELLINGS[tidy] : tidy;
}

function toBase(
  number: number,
  [times, per, shift = 0]: Unit,
  text: string | number,
): { readonly value: number } | Misreading {
  const value = ((number + shift) * times) / per;
  if (Math.abs(number) <= LARGEST && Math.abs(value) <= LARGEST) return { value };
  return { wrong: `is no sensible number: ${showValue(text)}`, remedy: 'give a finite number of ordinary size' };
}

function dimensionOf(unit: string): Dimension | undefined {
  const all = Object.keys(DIMENSIONS) as Dimension[]; // keys of a constant table: exactly the dimensions
  return all.find((dimension) => Object.hasOwn(DIMENSIONS[dimension].units, unit));
}

function withoutArticle(noun: string): string {
  return noun.replace(/^an? /, '');
}
