/** Data layout message, versions 1 to 4 (HDF5 File Format Specification 3.0, IV.A.2.i). */
import { notUnderstood, StructureCursor, type StructureFile } from './structure-cursor.ts';

export type ChunkIndex = 'b-tree-1' | 'single' | 'implicit' | 'fixed-array' | 'extensible-array' | 'b-tree-2';

export type Layout =
  | { kind: 'compact' }
  | { kind: 'virtual' }
  /** address null: nothing was ever written */
  | { kind: 'contiguous'; address: number | null; bytes: number | null }
  /** `chunk` in elements, without the element size that older versions append */
  | { kind: 'chunked'; index: ChunkIndex; address: number | null; chunk: number[]; filteredSingle: boolean };

const mostAxes = 33;

export function readLayout(file: StructureFile, body: Uint8Array): Layout {
  const cursor = new StructureCursor(file, body);
  const version = cursor.number(1);
  if (version === 1 || version === 2) return readEarly(cursor);
  if (version !== 3 && version !== 4) throw notUnderstood(`version ${version} of a data layout`);
  switch (cursor.number(1)) {
    case 0:
      return { kind: 'compact' };
    case 1:
      return { kind: 'contiguous', address: cursor.address(), bytes: cursor.length() };
    case 2:
      return version === 3 ? readChunked3(cursor) : readChunked4(cursor);
    case 3:
      return { kind: 'virtual' };
    default:
      throw notUnderstood('the class of a data layout');
  }
}

function axesOf(cursor: StructureCursor): number {
  const axes = cursor.number(1);
  if (axes < 1 || axes > mostAxes) throw notUnderstood(`a data layout of ${axes} axes`);
  return axes;
}

function sizesOf(cursor: StructureCursor, axes: number, bytes: number): number[] {
  const sizes = Array.from({ length: axes }, () => cursor.number(bytes));
  if (sizes.some((size) => size < 1 || !Number.isSafeInteger(size))) throw notUnderstood('the size of a chunk');
  return sizes;
}

function readEarly(cursor: StructureCursor): Layout {
  const axes = axesOf(cursor);
  const kind = cursor.number(1);
  cursor.skip(5);
  if (kind === 0) return { kind: 'compact' };
  const address = cursor.address();
  if (kind === 1) return { kind: 'contiguous', address, bytes: null };
  if (kind !== 2) throw notUnderstood('the class of a data layout');
  return { kind: 'chunked', index: 'b-tree-1', address, chunk: sizesOf(cursor, axes, 4).slice(0, -1), filteredSingle: false };
}

function readChunked3(cursor: StructureCursor): Layout {
  const axes = axesOf(cursor);
  const address = cursor.address();
  return { kind: 'chunked', index: 'b-tree-1', address, chunk: sizesOf(cursor, axes, 4).slice(0, -1), filteredSingle: false };
}

/** Bytes of the parameters of each index before its address. */
const indexParameters: Record<number, { index: ChunkIndex; bytes: number }> = {
  1: { index: 'single', bytes: 0 },
  2: { index: 'implicit', bytes: 0 },
  3: { index: 'fixed-array', bytes: 1 },
  4: { index: 'extensible-array', bytes: 5 },
  5: { index: 'b-tree-2', bytes: 6 },
};

function readChunked4(cursor: StructureCursor): Layout {
  const flags = cursor.number(1);
  const axes = axesOf(cursor);
  const sizeBytes = cursor.number(1);
  if (sizeBytes < 1 || sizeBytes > 8) throw notUnderstood('the size of a chunk');
  const chunk = sizesOf(cursor, axes, sizeBytes).slice(0, -1);
  const parameters = indexParameters[cursor.number(1)];
  if (!parameters) throw notUnderstood('the index of the chunks');
  const filteredSingle = parameters.index === 'single' && (flags & 2) !== 0;
  if (filteredSingle) {
    cursor.length();
    cursor.skip(4);
  }
  cursor.skip(parameters.bytes);
  return { kind: 'chunked', index: parameters.index, address: cursor.address(), chunk, filteredSingle };
}
