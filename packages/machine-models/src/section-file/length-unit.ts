import { type Document, type LengthUnit, type Path, parseQuantity, type TreeNode } from '@gapwright/fem-core/text';

const MILLIMETRE: LengthUnit = { name: 'mm', metres: 1e-3 };

/** The unit of length in which a file speaks at a place: that of the first length there, else of the first in its outline. */
export function lengthUnitAt(document: Document, path: Path): LengthUnit {
  return unitIn(nodeAt(document, path)) ?? unitIn(nodeAt(document, ['outline'])) ?? MILLIMETRE;
}

function nodeAt({ root }: Document, path: Path): TreeNode | undefined {
  return path.reduce<TreeNode | undefined>((node, step) => {
    if (node?.kind === 'list') return node.items[Number(step)];
    return node?.kind === 'group' ? node.entries.get(String(step))?.node : undefined;
  }, root);
}

function unitIn(node: TreeNode | undefined): LengthUnit | undefined {
  switch (node?.kind) {
    case 'scalar':
      return typeof node.value === 'string' ? unitOf(node.value) : undefined;
    case 'list':
      return firstOf(node.items);
    case 'group':
      return firstOf([...node.entries.values()].map((entry) => entry.node));
    default:
      return undefined;
  }
}

function firstOf(nodes: readonly TreeNode[]): LengthUnit | undefined {
  for (const node of nodes) {
    const unit = unitIn(node);
    if (unit !== undefined) return unit;
  }
  return undefined;
}

/** `12 mm` is told in mm, as it is written. */
function unitOf(text: string): LengthUnit | undefined {
  if ('wrong' in parseQuantity(text, 'length')) return undefined;
  const name = text.trim().replace(/^[-+\u2212]?[\d.]+([eE][-+]?\d+)?\s*/, '');
  const one = parseQuantity(`1 ${name}`, 'length');
  return 'wrong' in one ? undefined : { name, metres: one.value };
}
