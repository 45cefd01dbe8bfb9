import { expect, test } from 'vitest';
import { InputError } from '../../../packages/fem-core/src/base/fault.js';
import { readDocument } from '../../../packages/fem-core/src/io/yaml.js';

test('places are those of the text, also in what the parser has given up on', () => {
  const text = '  first: 1\nsecond: 2\n  third: 3\nlast: { a: 4 }\n';
  expect.assertions(2);
  try {
    readDocument(text, 'a.yaml');
  } catch (error) {
    const places = (error as InputError).faults.map(({ at }) => `${at?.line}:${at?.column}`);
    expect(error).toBeInstanceOf(InputError);
    expect(places).toEqual(expect.arrayContaining(['2:1', '3:8', '4:1', '4:5', '4:7', '4:9']));
  }
});
