/**
 * What people write, read with the places of everything in it: YAML documents, quantities with units, settings
 * `KEY=VALUE` laid over a document; the nearest known word to a slip, and words for messages. Knows nothing of fields
 * and opens no file.
 *
 * @module @gapwright/fem-core/text
 */

export type { LengthUnit, Piece } from '../base/fault.js';
export { sayIn } from '../base/fault.js';
export type { Document, Entry, Path, TreeNode } from '../io/document.js';
export { formatPath, placeOf, placeOfKey, plainValue } from '../io/document.js';
export { editDistance, findNearest } from '../io/nearest.js';
export type { Dimension, Misreading } from '../io/quantity.js';
export { parseAnyQuantity, parsePrice, parseQuantity } from '../io/quantity.js';
export type { Setting } from '../io/settings.js';
export { applySettings } from '../io/settings.js';
export { listWords, showText, showValue } from '../io/show.js';
export { escapeXml } from '../io/xml-text.js';
export { readDocument } from '../io/yaml.js';
