import type { Fault, Place } from '../base/fault.js';
import { showText } from './show.js';

/** Way from the root of a document to a value: keys of groups, numbers (from 0) of list entries. */
export type Path = readonly (string | number)[];

/** A value of an input file and where it stands. */
export type TreeNode =
  | {
      readonly kind: 'scalar';
      /** As YAML reads it. */
      readonly value: string | number | boolean | null;
      /** Where it starts. */
      readonly at: Place;
    }
  | {
      readonly kind: 'list';
      /** In order. */
      readonly items: readonly TreeNode[];
      /** Where it starts. */
      readonly at: Place;
    }
  | {
      readonly kind: 'group';
      /** By key, in the order of the text. */
      readonly entries: ReadonlyMap<string, Entry>;
      /** Where it starts. */
      readonly at: Place;
    };

/** One key of a group with its value. */
export interface Entry {
  /** Where the key stands. */
  readonly keyAt: Place;
  /** The value. */
  readonly node: TreeNode;
}

/** An input file as a tree, before anyone asks what its keys mean. */
export interface Document {
  /** All there is in it. */
  readonly root: TreeNode;
  /** What is wrong with the writing but leaves a tree to judge: keys given twice, tags, keys that are no text. */
  readonly faults: readonly Fault[];
}

/** The path as people write it: `rotor.magnets.width`, `tolerances.0.key`. */
export function formatPath(path: Path): string {
  return path.map((step) => showText(String(step))).join('.');
}

/**
 * Where the value at `path` stands; where it is missing, the deepest part of the way that is there: the key of the group
 * that should hold it.
 */
export function placeOf(document: Document, path: Path): Place {
  let [node, at] = [document.root, document.root.at];
  for (const [i, step] of path.entries()) {
    const next = childOf(node, step);
    if (next === undefined) return at;
    node = next.node;
    at = i === path.length - 1 ? node.at : next.keyAt;
  }
  return at;
}

/** Where the key at the end of `path` stands; of a list's entry, where the entry starts. */
export function placeOfKey(document: Document, path: Path): Place {
  const parent = path
    .slice(0, -1)
    .reduce<TreeNode | undefined>((node, step) => node && childOf(node, step)?.node, document.root);
  return (parent && path.length > 0 && childOf(parent, path[path.length - 1])?.keyAt) || placeOf(document, path);
}

function childOf(node: TreeNode, step: string | number): Entry | undefined {
  if (node.kind === 'group') return node.entries.get(String(step));
  if (node.kind !== 'list') return undefined;
  const item = node.items[Number(step)];
  return item && { keyAt: item.at, node: item };
}

/**
 * The values alone, without their places: lists become arrays, groups objects without a prototype, so that no key of theirs
 * can mean more than itself.
 */
export function plainValue(node: TreeNode): unknown {
  switch (node.kind) {
    case 'scalar':
      return node.value;
    case 'list':
      return node.items.map(plainValue);
    case 'group': {
      const object: Record<string, unknown> = Object.create(null);
      for (const [key, entry] of node.entries) object[key] = plainValue(entry.node);
      return object;
    }
  }
}
