import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { figure, force, resistance } from '../../packages/cli/src/figures.js';
import { cutText, plainText, wrapText } from '../../packages/cli/src/plain-text.js';
import { resultJson } from '../../packages/cli/src/results-json.js';

describe('figures', () => {
  test('have the digits asked for, without exponents in the range of machines', () => {
    expect([53.4567, 0.0712345, 2866.2, 16522, 9.9996, 0].map((value) => figure(value))).toEqual([
      '53.46',
      '0.07123',
      '2866',
      '16522',
      '10.00',
      '0',
    ]);
    expect(figure(-0.5, 2)).toBe('-0.50');
  });

  test('say the number they stand for, to the digits they show', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e8, noNaN: true }), fc.integer({ min: 2, max: 6 }), (value, digits) => {
        expect(Math.abs(Number(figure(value, digits)) / value - 1)).toBeLessThanOrEqual(0.5000001 * 10 ** (1 - digits));
      }),
    );
  });

  test('come in units that read well', () => {
    expect(resistance(0.36957)).toBe('369.6 mohm');
    expect(resistance(4.2)).toBe('4.200 ohm');
    expect(force(980.665)).toBe('981 N (100 kgf)');
  });
});

describe('texts', () => {
  test('on the way to a terminal keep to one line and hold nothing it would act upon', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        expect(plainText(text)).not.toMatch(/[\p{Cc}\u2028\u2029\u202a-\u202e\u2066-\u2069]/u);
        expect(plainText(plainText(text))).toBe(plainText(text));
      }),
    );
    expect(plainText('Grüße, 4 mm²')).toBe('Grüße, 4 mm²');
  });

  test('are wrapped without losing a letter, no line longer than told', () => {
    fc.assert(
      fc.property(fc.array(fc.stringMatching(/^[a-zé]{1,30}$/)), fc.integer({ min: 5, max: 40 }), (words, width) => {
        const lines = wrapText(words.join(' '), width);
        expect(lines.every((line) => line.length <= width)).toBe(true);
        expect(lines.join('').replaceAll(' ', '')).toBe(words.join(''));
      }),
    );
  });

  test('are cut with a mark', () => {
    expect(cutText('abcdef', 4)).toBe('abc…');
    expect(cutText('abcd', 4)).toBe('abcd');
  });
});

describe('a result as JSON', () => {
  test('is read back as it was, whatever it holds', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue({ maxDepth: 3 })), (value) => {
        expect(JSON.parse(resultJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
    );
  });

  test('has lists of numbers on one line, and leaves out what is undefined', () => {
    expect(resultJson({ a: [1, 2.5], b: undefined, c: { d: [] } })).toBe(
      '{\n  "a": [1, 2.5],\n  "c": {\n    "d": []\n  }\n}\n',
    );
  });

  test('says null for a figure that is not a finite number, as of a slice that did not converge', () => {
    expect(resultJson({ emf: { rms_V: Number.NaN, peak_V: Number.POSITIVE_INFINITY } })).toBe(
      '{\n  "emf": {\n    "rms_V": null,\n    "peak_V": null\n  }\n}\n',
    );
  });
});
