import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { formatFault, InputError } from '../../../packages/fem-core/src/base/fault.js';
import { placeOf, placeOfKey, plainValue } from '../../../packages/fem-core/src/io/document.js';
import { DOCUMENT_BOUNDS, readDocument } from '../../../packages/fem-core/src/io/yaml.js';

/** The message of the InputError that the text must give. */
function refusal(text: string): string {
  try {
    readDocument(text, 'a.yaml');
  } catch (error) {
    if (error instanceof InputError) return error.message;
    throw error;
  }
  throw new Error('the text was read');
}

const faultsIn = (text: string): string[] => readDocument(text, 'a.yaml').faults.map(formatFault);
const plain = (text: string): unknown => JSON.parse(JSON.stringify(plainValue(readDocument(text, 'a.yaml').root)));

test('block and flow style, comments and quotes give the same plain values', () => {
  const expected = { a: { b: [1, '2 mm', true, null] }, c: 'x: y' };
  expect(plain('a:\n  b: # list\n    - 1\n    - 2 mm\n    - true\n    - ~\nc: "x: y"\n')).toEqual(expected);
  expect(plain('{ a: { b: [1, 2 mm, true, null] }, c: "x: y" }')).toEqual(expected);
});

test('JSON is YAML: any JSON value with text keys reads as itself', () => {
  const keys = fc.string({ maxLength: 8 }).filter((key) => key !== '__proto__');
  const { tree } = fc.letrec((tie) => ({
    tree: fc.oneof(
      { depthSize: 'small' },
      fc.string(),
      fc.integer(),
      fc.boolean(),
      fc.constant(null),
      tie('list'),
      tie('group'),
    ),
    list: fc.array(tie('tree'), { maxLength: 4 }),
    group: fc.dictionary(keys, tie('tree'), { maxKeys: 4 }),
  }));
  fc.assert(
    fc.property(tree, (value) => {
      expect(plain(JSON.stringify([value]))).toEqual(JSON.parse(JSON.stringify([value])));
    }),
  );
});

test('version 1.2 holds whatever the text claims: on is a word, 1:20 is no number, << is a key', () => {
  expect(plain('%YAML 1.1\n---\na: on\nb: 1:20\n<<: 3')).toEqual({ a: 'on', b: '1:20', '<<': 3 });
});

test('places are those of the value, of the key, or of the group that lacks the key', () => {
  const document = readDocument('rotor:\n  gap: 19 mm\n  list: [a,  {b: 1}]\n', 'a.yaml');
  const at = (line: number, column: number) => ({ file: 'a.yaml', line, column });
  expect(placeOf(document, ['rotor', 'gap'])).toEqual(at(2, 8));
  expect(placeOfKey(document, ['rotor', 'gap'])).toEqual(at(2, 3));
  expect(placeOf(document, ['rotor', 'list', 1, 'b'])).toEqual(at(3, 18));
  expect(placeOf(document, ['rotor', 'disc', 'material'])).toEqual(at(1, 1));
  expect(placeOf(document, ['winding'])).toEqual(at(1, 1));
});

test('values at an alias stand where they are written', () => {
  const document = readDocument('a: &x {b: 1}\nc: *x\n', 'a.yaml');
  expect(plainValue(document.root)).toEqual({ a: { b: 1 }, c: { b: 1 } });
  expect(placeOf(document, ['c', 'b'])).toEqual({ file: 'a.yaml', line: 1, column: 11 });
});

describe('faults that leave a tree', () => {
  test.each([
    ['a: 1\nb: 2\na: 3\n', 'a.yaml:3:1: a: is given twice, first in line 1; keep one of the two'],
    ['a: {b: 1, b: 2}\n', 'a.yaml:1:11: a.b: is given twice, first in line 1; keep one of the two'],
    ['a: !!str 1\n', 'a.yaml:1:10: a: the tag tag:yaml.org,2002:str has no meaning here'],
    ['a: !run rm\n', 'a.yaml:1:9: a: the tag !run has no meaning here'],
    ['a: {1: x}\n', 'a.yaml:1:5: a: holds a key that cannot be one; give keys as text'],
    ['? [a]\n: 3\n', 'a.yaml:1:3: holds a key that cannot be one'],
    ['__proto__: {polluted: true}\n', 'a.yaml:1:1: holds a key that cannot be one'],
    ['a: &x [*x]\n', 'a.yaml:1:8: a.0: *x names no value that ends before it; write out the value'],
  ])('%j', (text, message) => {
    expect(faultsIn(text).join('\n')).toContain(message);
  });

  test('all of them at once, and no key reaches a prototype', () => {
    expect(faultsIn('a: 1\na: 2\n__proto__: {polluted: 1}\nb: !x 1\nb: 2\n')).toHaveLength(4);
    expect(({} as Record<string, unknown>).polluted).toBeUndefined();
    expect(plainValue(readDocument('constructor: {prototype: 1}', 'a').root)).toEqual(
      Object.assign(Object.create(null), { constructor: Object.assign(Object.create(null), { prototype: 1 }) }),
    );
  });
});

describe('text that is not one YAML document is refused with its place', () => {
  test.each([
    ['', 'a.yaml:1:1: is empty'],
    ['# nothing\n', 'a.yaml:1:1: is empty'],
    ['a: [1, 2\nb: 3\n', 'a.yaml:2:1: is not YAML'],
    ['a:\n\tb: 1\n', 'a.yaml:2:1: is not YAML: Tabs are not allowed as indentation; indent with spaces'],
    ['a: "x\nb: 3', 'Missing closing "quote'],
    ['a: b: c\n', 'a.yaml:1:4: is not YAML'],
    ['a: 1\n---\nb: 2\n', 'a.yaml:2:1: is not YAML: a second document starts here; keep one document in a file'],
    ['a: @x\n', 'put the text in quotes'],
  ])('%j', (text, message) => {
    expect(refusal(text)).toContain(message);
  });

  test('every syntax error of a text is told', () => {
    expect(refusal('a: [1\nb: "x" y\nc: 3 }\n').split('\n').length).toBeGreaterThan(1);
  });
});

describe('hostile texts are refused in little time', () => {
  const MEBI = 1024 * 1024;
  test.each([
    ['length', 'x'.repeat(DOCUMENT_BOUNDS.length + 1), /is too long/],
    ['depth, lists', '['.repeat(MEBI), /nested too deeply/],
    ['depth, groups', '{a: '.repeat(MEBI), /nested too deeply/],
    ['depth, dashes', '- '.repeat(MEBI), /nested too deeply/],
    ['depth, questions', '? '.repeat(MEBI), /nested too deeply/],
    ['words', 'key: 1\n'.repeat(MEBI / 8), /too many words/],
    ['anchors', '&a '.repeat(MEBI), /too many words/],
    ['comments', '#\n'.repeat(MEBI), /too many words/],
    ['documents', '---\n'.repeat(MEBI), /second document/],
    ['errors', `[${','.repeat(1000)}]`, /too many errors to list/],
    ['aliases', `a: &a 1\nb: [${'*a, '.repeat(DOCUMENT_BOUNDS.aliases + 1)}]`, /too many aliases/],
    ['alias bomb', bomb(9, 9), /too many values once its aliases are written out/],
  ])('%s', (_, text, message) => {
    const start = performance.now();
    expect(refusal(text)).toMatch(message);
    expect(performance.now() - start).toBeLessThan(20_000); // a hang, not a benchmark
  });

  test('any text gives a document or an InputError, never anything else', () => {
    const marks = fc.constantFrom(
      'a',
      ' ',
      '\n',
      ':',
      '- ',
      '[',
      ']',
      '{',
      '}',
      ',',
      '&a',
      '*a',
      '!',
      '"',
      "'",
      '|',
      '#',
      '?',
      '%',
      '\t',
      '---',
      '<<',
    );
    fc.assert(
      fc.property(fc.array(marks, { maxLength: 60 }), (words) => {
        try {
          plainValue(readDocument(words.join(''), 'a.yaml').root);
        } catch (error) {
          expect(error).toBeInstanceOf(InputError);
        }
      }),
      { numRuns: 2000 },
    );
  });
});

/** Lists of `width` aliases, each naming the list before: width^depth values when written out. */
function bomb(depth: number, width: number): string {
  const lines = ['a0: &a0 [x]'];
  for (let i = 1; i <= depth; i++) lines.push(`a${i}: &a${i} [${`*a${i - 1}, `.repeat(width)}]`);
  return lines.join('\n');
}
