/** How many elements of a chunked array the file really holds, counted in the chunk's own index. */
import { sizeOf } from '../../stored-array.ts';
import { visitBTree1 } from './chunk-b-tree-1.ts';
import { visitBTree2 } from './chunk-b-tree-2.ts';
import { visitExtensibleArray } from './chunk-extensible-array.ts';
import { visitFixedArray } from './chunk-fixed-array.ts';
import type { Dataspace } from './dataspace-message.ts';
import type { Layout } from './layout-message.ts';
import { notUnderstood, type StructureFile } from './structure-cursor.ts';

/** Chunk counts along each axis up to the largest shape; 1 for an unlimited axis, which then is the slowest. */
function chunkCounts(space: Dataspace, chunk: number[]): number[] {
  return space.largest.map((size, i) => (size === null ? 1 : Math.ceil(size / chunk[i])));
}

/** Sum over all allocated chunks of their elements inside the shape. */
export function countAllocated(file: StructureFile, layout: Extract<Layout, { kind: 'chunked' }>, space: Dataspace): number {
  const { shape } = space;
  const { chunk, address } = layout;
  if (chunk.length !== shape.length) throw notUnderstood('chunks of another number of axes than the array');
  if (address === null) return 0;
  let elements = 0;

  /** `at`: position of the chunk in chunks along each axis */
  function add(at: ArrayLike<number>): void {
    let inside = 1;
    for (let i = 0; i < shape.length; i++) inside *= Math.max(0, Math.min(chunk[i], shape[i] - at[i] * chunk[i]));
    elements += inside;
  }

  /** Position of the chunk with linear index `index`, the axes in `order` (slowest first). */
  const counts = chunkCounts(space, chunk);
  const at = new Array<number>(shape.length).fill(0);
  function addLinear(index: number, order: number[]): void {
    let rest = index;
    for (let i = order.length - 1; i > 0; i--) {
      const count = counts[order[i]];
      at[order[i]] = rest % count;
      rest = Math.floor(rest / count);
    }
    if (order.length > 0) at[order[0]] = rest;
    add(at);
  }

  const natural = shape.map((_, i) => i);
  switch (layout.index) {
    case 'single':
    case 'implicit':
      return sizeOf(shape);
    case 'b-tree-1':
      visitBTree1(file, address, chunk, add);
      break;
    case 'b-tree-2':
      visitBTree2(file, address, shape.length, add);
      break;
    case 'fixed-array':
      visitFixedArray(file, address, (index) => addLinear(index, natural));
      break;
    case 'extensible-array': {
      // The unlimited axis is moved to the front (H5VM_swizzle_coords of the HDF5 library).
      const unlimited = space.largest.indexOf(null);
      const order = unlimited < 0 ? natural : [unlimited, ...natural.filter((axis) => axis !== unlimited)];
      visitExtensibleArray(file, address, (index) => addLinear(index, order));
      break;
    }
  }
  if (elements > sizeOf(shape)) throw notUnderstood('more chunks than the array has room for');
  return elements;
}
