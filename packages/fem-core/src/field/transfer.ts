import type { Field } from './field.js';

/**
 * The buffers of a field's mesh and potential, and of further arrays that go with it: the transfer list with which
 * `postMessage(field, fieldBuffers(field))` hands the field to a worker, or back, without a copy. The sender's arrays are
 * empty after it. Materials are copied, since curves are shared between fields; an edge condition given as a function cannot
 * be sent at all.
 * @throws Error for arrays that are views of a part of a buffer: moving it would empty others
 */
export function fieldBuffers(field: Field, ...more: readonly ArrayBufferView[]): ArrayBuffer[] {
  const buffers = new Set<ArrayBuffer>();
  for (const value of [...Object.values(field.mesh), field.potential, ...more]) {
    if (!ArrayBuffer.isView(value) || !(value.buffer instanceof ArrayBuffer)) continue;
    if (value.byteLength !== value.buffer.byteLength) {
      throw new Error('fieldBuffers: an array is a view of a larger buffer'); // moving it would empty others
    }
    buffers.add(value.buffer);
  }
  return [...buffers];
}
