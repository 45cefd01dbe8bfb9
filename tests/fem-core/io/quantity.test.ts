import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type Dimension,
  parseAnyQuantity,
  parsePrice,
  parseQuantity,
} from '../../../packages/fem-core/src/io/quantity.js';

function readValue(text: string | number, dimension: Dimension): number {
  const reading = parseQuantity(text, dimension);
  if ('wrong' in reading) throw new Error(reading.wrong);
  return reading.value;
}

function readWrong(text: string | number, dimension: Dimension): string {
  const reading = parseQuantity(text, dimension);
  if (!('wrong' in reading)) throw new Error(`${text} was read as ${reading.value}`);
  return `${reading.wrong}; ${reading.remedy}`;
}

/** Unit definitions: SI prefixes; inch, foot, pound: international agreement of 1959; 1 Oe = 1000/(4 pi) A/m, 1 G = 1e-4 T. */
const EXAMPLES: readonly (readonly [text: string, dimension: Dimension, value: number])[] = [
  ['12 mm', 'length', 0.012],
  ['12mm', 'length', 0.012],
  ['  12 mm ', 'length', 0.012],
  ['.5 m', 'length', 0.5],
  ['2 in', 'length', 0.0508],
  ['1 ft', 'length', 0.3048],
  ['10 mil', 'length', 0.000254],
  ['250 um', 'length', 0.00025],
  ['250 \u00b5m', 'length', 0.00025],
  ['3 mm2', 'area', 3e-6],
  ['3 mm^2', 'area', 3e-6],
  ['3 mm\u00b2', 'area', 3e-6],
  ['90 deg', 'angle', Math.PI / 2],
  ['90\u00b0', 'angle', Math.PI / 2],
  ['1e-3 T', 'fluxDensity', 0.001],
  ['13 kG', 'fluxDensity', 1.3],
  ['500 mT', 'fluxDensity', 0.5],
  ['955 kA/m', 'fieldStrength', 955e3],
  ['12 kOe', 'fieldStrength', 12e6 / (4 * Math.PI)],
  ['380 rpm', 'rotation', 380],
  ['380 1/min', 'rotation', 380],
  ['60 degC', 'temperature', 60],
  ['-10\u00b0C', 'temperature', -10],
  ['212 degF', 'temperature', 100],
  ['293.15 K', 'temperature', 20],
  ['-0.12 %/K', 'perKelvin', -0.0012],
  ['\u22120.12 %/K', 'perKelvin', -0.0012],
  ['3 A/mm2', 'currentDensity', 3e6],
  ['5 mohm', 'resistance', 0.005],
  ['5 m\u03a9', 'resistance', 0.005],
  ['1.5 mH', 'inductance', 0.0015],
  ['7500 kg/m3', 'density', 7500],
  ['0.1 lb/in3', 'density', 2767.990471020312],
  ['0.15 N.m', 'torque', 0.15],
  ['0.15 N\u00b7m', 'torque', 0.15],
  ['2e-6 Nm.s2', 'dragFactor', 2e-6],
  ['30 W/m2K', 'heatTransfer', 30],
  ['30 W/(m2 K)', 'heatTransfer', 30],
  ['5 m/s', 'velocity', 5],
  ['1.16 kW', 'power', 1160],
  ['2 %', 'ratio', 0.02],
  ['0.02', 'ratio', 0.02],
];

test.each(EXAMPLES)('%s as %s is %d in the base unit', (text, dimension, value) => {
  expect(readValue(text, dimension)).toBeCloseTo(value, 14 - Math.ceil(Math.log10(Math.abs(value))));
});

test('whole numbers of a decimal unit are the doubles nearest to their value', () => {
  fc.assert(
    fc.property(fc.integer({ min: -1_000_000, max: 1_000_000 }), (whole) => {
      expect(readValue(`${whole} mm`, 'length')).toBe(Number(`${whole}e-3`));
      expect(readValue(`${whole} um`, 'length')).toBe(Number(`${whole}e-6`));
    }),
  );
});

test('what is written out in any unit of its dimension reads back as what it was', () => {
  const unit = fc.constantFrom<readonly [string, Dimension, number]>(
    ['mm', 'length', 1e-3],
    ['in', 'length', 0.0254],
    ['kA/m', 'fieldStrength', 1e3],
    ['deg', 'angle', Math.PI / 180],
    ['kG', 'fluxDensity', 0.1],
    ['rad/s', 'rotation', 30 / Math.PI],
    ['A/mm2', 'currentDensity', 1e6],
  );
  const size = fc.double({ min: 1e-6, max: 1e6, noNaN: true });
  fc.assert(
    fc.property(unit, size, fc.constantFrom('', ' ', '\t'), ([name, dimension, scale], value, space) => {
      expect(readValue(`${value}${space}${name}`, dimension) / (value * scale)).toBeCloseTo(1, 14);
    }),
  );
});

test('temperatures scale and shift: K, degC and degF tell the same state', () => {
  fc.assert(
    fc.property(fc.double({ min: -200, max: 1000, noNaN: true }), (celsius) => {
      expect(readValue(`${celsius + 273.15} K`, 'temperature')).toBeCloseTo(celsius, 10);
      expect(readValue(`${(celsius * 9) / 5 + 32} degF`, 'temperature')).toBeCloseTo(celsius, 10);
    }),
  );
});

describe('refused with a reason and what would do', () => {
  test.each<readonly [string | number, Dimension, RegExp]>([
    ['12', 'length', /needs a unit, got 12; give a length in m, mm, .* or mil/],
    [12, 'length', /needs a unit, got 12/],
    ['12 parsec', 'length', /must be a length, got 12 parsec, but parsec is not a known unit/],
    ['12 V', 'length', /but V is a unit of voltage; give a length/],
    ['12 MM', 'length', /MM is not a known unit/],
    ['mm', 'length', /must start with a number, got mm/],
    ['', 'length', /must start with a number, got an empty text/],
    ['1,5 mm', 'length', /has a comma in the number: 1,5 mm; write 1.5 mm/],
    ['1e400 mm', 'length', /is no sensible number/],
    ['1e16 m', 'length', /is no sensible number/],
    [Number.NaN, 'ratio', /is no sensible number/],
    [Number.POSITIVE_INFINITY, 'ratio', /is no sensible number/],
    ['Infinity mm', 'length', /must start with a number/],
    ['0x10 mm', 'length', /x10mm is not a known unit/],
    ['1 2 mm', 'length', /2mm is not a known unit/],
    ['3 constructor', 'length', /constructor is not a known unit/],
    ['3 __proto__', 'length', /__proto__ is not a known unit/],
  ])('%s as %s', (text, dimension, message) => {
    expect(readWrong(text, dimension)).toMatch(message);
  });

  test('whatever the text, the answer is a finite number or a reason on one short line without control characters', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string({ unit: 'binary', maxLength: 200 }), fc.string({ maxLength: 300 })), (text) => {
        const reading = parseQuantity(text, 'length');
        if ('value' in reading) expect(Number.isFinite(reading.value)).toBe(true);
        else expect(`${reading.wrong}${reading.remedy}`).toMatch(/^[^\p{Cc}]{1,600}$/u);
      }),
    );
  });
});

test('a spread may be of any dimension, or a share', () => {
  expect(parseAnyQuantity('0.3 mm')).toEqual({ value: 0.0003, dimension: 'length' });
  expect(parseAnyQuantity('2 %')).toEqual({ value: 0.02, dimension: 'ratio' });
  expect(parseAnyQuantity(0.02)).toEqual({ value: 0.02, dimension: 'ratio' });
  expect(parseAnyQuantity('2 bushels')).toHaveProperty('wrong');
});

test('prices are per kilogram in any currency', () => {
  expect(parsePrice('14 EUR/kg')).toEqual({ perKilogram: 14, currency: 'EUR' });
  expect(parsePrice('0.014 NZD/g')).toEqual({ perKilogram: 14, currency: 'NZD' });
  expect(parsePrice('45359237 USD/lb')).toEqual({ perKilogram: 1e8, currency: 'USD' });
  for (const text of ['14', '14 EUR', '14 euro/kg', '14 EUR/m']) expect(parsePrice(text)).toHaveProperty('wrong');
});
