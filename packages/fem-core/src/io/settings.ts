import { type Fault, InputError } from '../base/fault.js';
import type { Document, Entry, TreeNode } from './document.js';
import { showText } from './show.js';
import { readDocument } from './yaml.js';

/** One value of a file said anew from outside: `--set rotor.gap='20 mm'`. */
export interface Setting {
  /** Dotted path; numbers (from 0) are entries of lists. */
  readonly key: string;
  /** YAML: a word, a quantity, `[1, 2]`, `{ a: 1 }`. */
  readonly value: string;
}

/**
 * The document with the settings in place of, or beside, what it says; groups on the way are made where they are
 * missing, a list grows by one entry at most. The values' places are in the settings themselves, `--set KEY`, line 1.
 *
 * Settings that cannot be carried out become faults of the document.
 */
export function applySettings(document: Document, settings: readonly Setting[]): Document {
  return settings.reduce(applySetting, document);
}

function applySetting(document: Document, { key, value }: Setting): Document {
  const file = `--set ${showText(key)}`;
  try {
    const { root: node, faults } = readDocument(value, file);
    const entry: Entry = { keyAt: { file, line: 1, column: 1 }, node };
    return {
      root: replace(document.root, key.split('.'), entry, ''),
      faults: [...document.faults, ...faults.map((fault) => ({ ...fault, key: joinKeys(showText(key), fault.key) }))],
    };
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    const at = { file, line: 1, column: 1 };
    const faults = error.faults.map(
      (fault): Fault => ({ ...fault, at: fault.at ?? at, key: joinKeys(showText(key), fault.key) }),
    );
    return { root: document.root, faults: [...document.faults, ...faults] };
  }
}

/** The node with `entry` at the end of the way; `done` is the way walked so far, for messages. */
function replace(node: TreeNode, way: readonly string[], entry: Entry, done: string): TreeNode {
  const [step, ...rest] = way;
  if (step === undefined) return entry.node;
  const here = joinKeys(done, showText(step));
  if (step === '' || step === '__proto__') {
    throw refusal('is no way into a file', 'give keys with one dot between each two, for example rotor.gap');
  }
  if (node.kind === 'list') {
    const index = /^\d{1,9}$/.test(step) ? Number(step) : Number.NaN;
    if (!(index <= node.items.length)) {
      const last = node.items.length;
      throw refusal(`${done} is a list of ${last}`, `give a number from 0 to ${last}, ${last} to add an entry`);
    }
    const items = [...node.items];
    items[index] = replace(items[index] ?? emptyGroup(entry), rest, entry, here);
    return { ...node, items };
  }
  if (node.kind === 'scalar' && node.value !== null) {
    throw refusal(`${done} holds ${showText(String(node.value))}, not a group of keys`, 'set the whole of it instead');
  }
  const group = node.kind === 'group' ? node : emptyGroup(entry);
  const old = group.entries.get(step);
  const inner = replace(old?.node ?? emptyGroup(entry), rest, entry, here);
  const keyAt = rest.length > 0 && old ? old.keyAt : entry.keyAt;
  return { ...group, entries: new Map(group.entries).set(step, { keyAt, node: inner }) };
}

function emptyGroup(entry: Entry): TreeNode & { readonly kind: 'group' } {
  return { kind: 'group', at: entry.keyAt, entries: new Map() };
}

function joinKeys(first: string, second: string): string {
  return first === '' || second === '' ? first + second : `${first}.${second}`;
}

function refusal(wrong: string, remedy: string): InputError {
  return new InputError([{ code: 'bad-setting', key: '', wrong, remedy }]);
}
