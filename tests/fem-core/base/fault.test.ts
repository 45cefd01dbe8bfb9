import type { Fault } from '@gapwright/fem-core';
import { formatFault, InputError, MU0 } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { checkAll, sayIn, tellWrong } from '../../../packages/fem-core/src/base/fault.js';
import { unreachable } from '../../../packages/fem-core/src/base/unreachable.js';

const fault: Fault = {
  code: 'out-of-range',
  at: { file: 'hut.yaml', line: 7, column: 3 },
  key: 'rotor.gap',
  wrong: 'must be more than 0 mm, got -1 mm',
  remedy: 'give the distance from magnet face to magnet face',
};

test('a fault reads FILE:LINE:COLUMN: key: what is wrong; what would do', () => {
  expect(formatFault(fault)).toBe(
    'hut.yaml:7:3: rotor.gap: must be more than 0 mm, got -1 mm; give the distance from magnet face to magnet face',
  );
});

test('a fault leaves out the place, the key and the remedy it does not have', () => {
  expect(formatFault({ ...fault, at: undefined })).toMatch(/^rotor\.gap: must/);
  expect(formatFault({ ...fault, key: '' })).toMatch(/^hut\.yaml:7:3: must/);
  expect(formatFault({ code: 'x', key: '', wrong: 'is wrong', remedy: '' })).toBe('is wrong');
});

test('an input error tells all its faults, a line each, and keeps them for programs', () => {
  const error = new InputError([fault, { code: 'x', key: 'poles', wrong: 'is odd', remedy: 'give an even number' }]);
  expect(error).toBeInstanceOf(Error);
  expect(error.name).toBe('InputError');
  expect(error.message.split('\n')).toEqual([formatFault(fault), 'poles: is odd; give an even number']);
  expect(error.faults.map(({ code }) => code)).toEqual(['out-of-range', 'x']);
});

test('lengths among the words of a fault are told in any unit, to nine digits', () => {
  const pieces = ['is ', { metres: 0.1 + 0.2 }, ' wide near ', { metres: [0.0254, -0] }] as const;
  expect(tellWrong(pieces)).toEqual({ wrong: 'is 0.3 m wide near (0.0254, 0) m', pieces });
  expect(sayIn({ name: 'mm', metres: 1e-3 }, pieces)).toBe('is 300 mm wide near (25.4, 0) mm');
  expect(sayIn({ name: 'in', metres: 0.0254 }, pieces)).toBe('is 11.8110236 in wide near (1, 0) in');
  expect(tellWrong('is odd')).toEqual({ wrong: 'is odd' });
});

test('several checks tell all that they find, and a fault that is not of the input stops them', () => {
  const refuse = (key: string) => () => {
    throw new InputError([{ ...fault, key }]);
  };
  const found = (): void => checkAll(refuse('a'), () => {}, refuse('b'));
  expect(found).toThrow(/a: must.*\n.*b: must/);
  expect(() => checkAll(() => {})).not.toThrow();
  expect(() =>
    checkAll(refuse('a'), () => {
      throw new RangeError('own');
    }),
  ).toThrow(RangeError);
});

test('a case nobody thought of is told, with its value', () => {
  const later: unknown = { kind: 'superconductor' };
  expect(() => unreachable(later as never)).toThrow(/no case for .*superconductor/);
});

test('the magnetic constant agrees with CODATA 2018, 1.25663706212(19)e-6 H/m, to a part in 1e9', () => {
  expect(Math.abs(MU0 / 1.25663706212e-6 - 1)).toBeLessThan(1e-9);
});
