import { expect, test } from 'vitest';
import { listWords, showText, showValue } from '../../../packages/fem-core/src/io/show.js';

test('what moves the cursor, breaks the line or turns the reading order is escaped', () => {
  expect(showText('a\u001b[31mred\n\u202ex\u2028')).toBe('a\\u{1b}[31mred\\u{a}\\u{202e}x\\u{2028}');
  expect(showText('<b>plain text</b> \u00e9\u4e2d')).toBe('<b>plain text</b> \u00e9\u4e2d');
});

test('long texts are cut', () => {
  expect(showText('x'.repeat(1000))).toBe(`${'x'.repeat(60)}...`);
});

test('numbers that are none are told as YAML writes them', () => {
  expect([Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY].map(showValue)).toEqual([
    '.nan',
    '.inf',
    '-.inf',
  ]);
});

test('values are told by themselves or by their kind', () => {
  expect([undefined, null, '', 3, true, [], {}].map(showValue)).toEqual([
    'nothing',
    'nothing',
    'an empty text',
    '3',
    'true',
    'a list',
    'a group of keys',
  ]);
  expect(listWords(['m', 'mm', 'in'])).toBe('m, mm or in');
});
