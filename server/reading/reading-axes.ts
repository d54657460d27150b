/**
 * A field of a reading over its stored array: where time is in storage, how its nodes are counted. Nodes count through
 * the space (and component) axes in C order of the reading's axes; only a Fortran-ordered array with more than one such
 * axis stores them otherwise.
 */
import type { ArrayInfo, AxisName } from '#contract/reading.ts';
import { sizeOf } from './stored-array.ts';

export interface FieldAxes {
  /** logical shape and axis names in the reading's order */
  shape: number[];
  names: AxisName[];
  /** position of time in storage order; -1 without time */
  timeAxis: number;
  snapshots: number;
  nodes: number;
  /** sizes of the axes without time, in storage order and in the reading's order */
  storedSpace: number[];
  space: number[];
  /** for each axis of `storedSpace` its position in `space` */
  permutation: number[];
  /** nodes lie in another order in the file than they are counted */
  permuted: boolean;
}

export function fieldAxes(info: Pick<ArrayInfo, 'shape' | 'order'>, names: AxisName[]): FieldAxes {
  const { shape } = info;
  const logicalTime = names.indexOf('time');
  const logical = shape.map((_, i) => i);
  const stored = info.order === 'F' ? logical.toReversed() : logical;
  const spaceAxes = logical.filter((axis) => axis !== logicalTime);
  const storedSpaceAxes = stored.filter((axis) => axis !== logicalTime);
  const space = spaceAxes.map((axis) => shape[axis]);
  const permutation = storedSpaceAxes.map((axis) => spaceAxes.indexOf(axis));
  return {
    shape,
    names,
    timeAxis: logicalTime < 0 ? -1 : stored.indexOf(logicalTime),
    snapshots: logicalTime < 0 ? 1 : shape[logicalTime],
    nodes: sizeOf(space),
    storedSpace: storedSpaceAxes.map((axis) => shape[axis]),
    space,
    permutation,
    permuted: space.filter((size) => size > 1).length > 1 && permutation.some((at, i) => at !== i),
  };
}

/** The reading's node index of the node that is stored at `index`. */
export function nodeOf(axes: FieldAxes, index: number): number {
  if (!axes.permuted || index < 0) return index;
  const { storedSpace, space, permutation } = axes;
  const at = new Array<number>(space.length);
  let rest = index;
  for (let i = storedSpace.length - 1; i >= 0; i--) {
    at[permutation[i]] = rest % storedSpace[i];
    rest = Math.floor(rest / storedSpace[i]);
  }
  return at.reduce((node, position, i) => node * space[i] + position, 0);
}

/** Reading's node index of every stored node, or null where they are the same. */
export function nodeOrder(axes: FieldAxes): Uint32Array | null {
  if (!axes.permuted) return null;
  return Uint32Array.from({ length: axes.nodes }, (_, index) => nodeOf(axes, index));
}
