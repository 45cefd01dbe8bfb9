import {
  Composer,
  type ErrorCode,
  isAlias,
  isMap,
  isScalar,
  isSeq,
  Lexer,
  LineCounter,
  type ParsedNode,
  Parser,
  type YAMLMap,
  type Document as YamlDocument,
} from 'yaml';
import type { Fault, Place } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { type Document, type Entry, formatPath, type Path, type TreeNode } from './document.js';
import { showText } from './show.js';

/** Bounds that no honest file comes near and that keep the work on any file small. */
export const DOCUMENT_BOUNDS = {
  /** Characters. */
  length: 4 * 1024 * 1024,
  /** Words and marks of the language, spaces included. */
  lexemes: 200_000,
  /** Groups and lists within one another. */
  depth: 32,
  /** Uses of aliases. */
  aliases: 100,
  /** Values once every alias is written out. */
  values: 200_000,
  /** Syntax errors reported; the rest follow from the first ones more often than not. */
  errors: 50,
} as const;

type PlaceAt = (offset: number) => Place;
type ParsedDocument = YamlDocument.Parsed;
type ParsedPair = YAMLMap.Parsed['items'][number];
type Bound = keyof typeof DOCUMENT_BOUNDS;

const OVER_BOUND: Readonly<Record<Bound, readonly [wrong: string, remedy: string]>> = {
  length: ['is too long', 'give at most 4 MiB; keep tables in files of their own'],
  lexemes: ['holds too many words', 'keep tables in files of their own'],
  depth: ['is nested too deeply', `put at most ${DOCUMENT_BOUNDS.depth} groups and lists within one another`],
  aliases: ['uses too many aliases', `write out the values, or use at most ${DOCUMENT_BOUNDS.aliases} aliases (*name)`],
  values: ['holds too many values once its aliases are written out', `give at most ${DOCUMENT_BOUNDS.values}`],
  errors: ['has too many errors to list', 'mend the ones above first'],
};

const REMEDIES: Partial<Readonly<Record<ErrorCode, string>>> = {
  BAD_ALIAS: 'name the value with &name before it is used as *name',
  BAD_INDENT: 'give all keys of one group the same number of leading spaces',
  TAB_AS_INDENT: 'indent with spaces',
  MISSING_CHAR: 'add what is missing',
  MULTIPLE_DOCS: 'keep one document in a file',
  BAD_SCALAR_START: 'put the text in quotes',
};

/**
 * Reads YAML 1.2 text (so JSON too) into a tree with places.
 *
 * The tree holds plain values only: aliases are written out, tags and keys that are no text are faults of the document.
 * The text may come from anyone: its length, depth, aliases and values are bounded (`DOCUMENT_BOUNDS`).
 *
 * @param file  the name to tell in places
 * @throws InputError for text that is not YAML, is empty, holds several documents, or goes beyond a bound
 */
export function readDocument(text: string, file: string): Document {
  const lines = lineCounterOf(text);
  const placeAt: PlaceAt = (offset) => {
    const { line, col } = lines.linePos(offset);
    return { file, line, column: col };
  };
  const parsed = compose(text, placeAt);
  const faults: Fault[] = [];
  const root = buildTree(parsed, placeAt, faults);
  return { root, faults };
}

/** Of the text itself: the parser does not tell of line ends in what it has given up on. */
function lineCounterOf(text: string): LineCounter {
  const lines = new LineCounter();
  for (let start = 0; ; ) {
    lines.addNewLine(start);
    start = text.indexOf('\n', start) + 1;
    if (start === 0) return lines;
  }
}

function compose(text: string, placeAt: PlaceAt): ParsedDocument {
  if (text.length > DOCUMENT_BOUNDS.length) throw overBound('length', placeAt(0));
  // Schema and merge are fixed, so that a %YAML directive cannot bring back the rules of YAML 1.1; keys given twice are
  // found below, as the library's own search takes a time that grows with the square of their number.
  const rules = { schema: 'core', merge: false, uniqueKeys: false, prettyErrors: false, logLevel: 'silent' } as const;
  const documents = new Composer(rules).compose(tokensOf(text, placeAt), true, text.length);
  const parsed = documents.next().value as ParsedDocument; // one at least, as asked for by `true`
  const faults = parsed.errors.map(({ code, message, pos }) => syntaxFault(placeAt(pos[0]), code, message));
  const second = documents.next().value;
  if (second) faults.push(syntaxFault(placeAt(second.range[0]), 'MULTIPLE_DOCS', 'a second document starts here'));
  if (faults.length === 0 && parsed.contents === null) {
    faults.push({
      code: 'empty-file',
      at: placeAt(0),
      key: '',
      wrong: 'is empty',
      remedy: 'give it a value',
    });
  }
  if (faults.length > DOCUMENT_BOUNDS.errors) {
    const rest = overBound('errors', faults[DOCUMENT_BOUNDS.errors].at);
    throw new InputError([...faults.slice(0, DOCUMENT_BOUNDS.errors), ...rest.faults]);
  }
  if (faults.length > 0) throw new InputError(faults);
  return parsed;
}

/** The text's tokens; stops where a bound is passed, before the library recurses into what it read. */
function* tokensOf(text: string, placeAt: PlaceAt) {
  const parser = new Parser();
  let lexemes = 0;
  for (const lexeme of new Lexer().lex(text)) {
    yield* parser.next(lexeme);
    if (++lexemes > DOCUMENT_BOUNDS.lexemes) throw overBound('lexemes', placeAt(parser.offset));
    // The stack holds the document and, for each level, a collection and at most one scalar.
    if (parser.stack.length > DOCUMENT_BOUNDS.depth + 2) throw overBound('depth', placeAt(parser.offset));
  }
  yield* parser.end();
}

/** Turns the library's nodes into ours; what leaves a usable tree goes to `faults`. */
function buildTree(parsed: ParsedDocument, placeAt: PlaceAt, faults: Fault[]): TreeNode {
  /** Finished values by the name of their anchor: a value cannot name itself, so the tree has no circles. */
  const named = new Map<string, { readonly node: TreeNode; readonly values: number }>();
  let aliases = 0;
  let values = 0;

  const build = (node: ParsedNode | null, at: Place, path: Path): TreeNode => {
    if (isAlias(node)) return writeOut(node.source, at, path);
    const before = values;
    count(1, at);
    const built = buildPlain(node, at, path);
    if (node?.tag !== undefined) {
      const remedy = 'leave it out; put text that looks like a number in quotes';
      tell('tag', at, path, `the tag ${showText(node.tag)} has no meaning here`, remedy);
    }
    if (node?.anchor !== undefined) named.set(node.anchor, { node: built, values: values - before });
    return built;
  };

  const buildPlain = (node: ParsedNode | null, at: Place, path: Path): TreeNode => {
    if (isMap(node)) return { kind: 'group', at, entries: buildEntries(node.items, path) };
    if (isSeq(node)) {
      const items = node.items as (ParsedNode | null)[]; // what the composer puts there
      return { kind: 'list', at, items: items.map((item, i) => build(item, placeOfNode(item) ?? at, [...path, i])) };
    }
    return { kind: 'scalar', value: isScalar(node) ? plainScalar(node.value) : null, at };
  };

  const buildEntries = (pairs: readonly ParsedPair[], path: Path): ReadonlyMap<string, Entry> => {
    const entries = new Map<string, Entry>();
    for (const pair of pairs) {
      const keyAt = placeOfNode(pair.key) ?? placeAt(0);
      const key = isScalar(pair.key) ? pair.key.value : undefined;
      if (typeof key !== 'string' || key === '__proto__') {
        const remedy = 'give keys as text, in quotes where they look like numbers';
        tell('bad-key', keyAt, path, 'holds a key that cannot be one', remedy);
        continue;
      }
      const first = entries.get(key);
      if (first !== undefined) {
        const wrong = `is given twice, first in line ${first.keyAt.line}`;
        tell('duplicate-key', keyAt, [...path, key], wrong, 'keep one of the two');
        continue;
      }
      entries.set(key, { keyAt, node: build(pair.value, placeOfNode(pair.value) ?? keyAt, [...path, key]) });
    }
    return entries;
  };

  const writeOut = (name: string, at: Place, path: Path): TreeNode => {
    if (++aliases > DOCUMENT_BOUNDS.aliases) throw overBound('aliases', at);
    const known = named.get(name);
    if (known === undefined) {
      tell('bad-alias', at, path, `*${showText(name)} names no value that ends before it`, 'write out the value');
      return { kind: 'scalar', value: null, at };
    }
    count(known.values, at);
    return known.node;
  };

  const count = (more: number, at: Place): void => {
    values += more;
    if (values > DOCUMENT_BOUNDS.values) throw overBound('values', at);
  };
  const placeOfNode = (node: ParsedNode | null): Place | undefined => node?.range && placeAt(node.range[0]);
  const tell = (code: string, at: Place, path: Path, wrong: string, remedy: string): void => {
    faults.push({ code, at, key: formatPath(path), wrong, remedy });
  };

  return build(parsed.contents, placeOfNode(parsed.contents) ?? placeAt(0), []);
}

/** The core schema makes no other values; should it ever, their text will do. */
function plainScalar(value: unknown): string | number | boolean | null {
  if (typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean') return value;
  return value === null || value === undefined ? null : String(value);
}

function syntaxFault(at: Place, code: ErrorCode, message: string): Fault {
  const remedy = REMEDIES[code] ?? 'check the brackets, quotes and leading spaces here';
  return { code: 'yaml-syntax', at, key: '', wrong: `is not YAML: ${showText(message, 200)}`, remedy };
}

function overBound(bound: Bound, at: Place | undefined): InputError {
  const [wrong, remedy] = OVER_BOUND[bound];
  return new InputError([{ code: 'over-bound', at, key: '', wrong, remedy }]);
}
