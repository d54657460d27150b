/**
 * The part of a field that a picture shows: all of it in one or two dimensions, one layer in three. The last two axes that are left span the
 * picture; the first of an archive's axes is usually x, so that axis goes to the right.
 */
import type { FieldValues } from '#contract/shape.ts';

type Axis = FieldValues['axes'][number];

export interface Slice {
  x: Axis;
  /** null: a line along x */
  y: Axis | null;
  /** y.count x x.count, x fastest */
  values: (number | null)[];
}

const point: Axis = { name: 'node', unit: null, count: 1, nodes: null };

/** `cut`: the axis that is held at one index; axes of a single node are dropped. More than three long axes: the others are held at 0. */
export function sliceOf({ axes, values }: Pick<FieldValues, 'axes' | 'values'>, cut: { axis: number; index: number } | null): Slice {
  const strides = axes.map((_, i) => axes.slice(i + 1).reduce((product, axis) => product * axis.count, 1));
  const free = axes.map((axis, i) => ({ axis, i })).filter(({ axis, i }) => axis.count > 1 && i !== cut?.axis).slice(0, 2);
  const start = cut ? cut.index * strides[cut.axis] : 0;
  if (free.length === 0) return { x: axes[0] ?? point, y: null, values: values.slice(start, start + 1) };
  const [first, second] = free;
  // An axis whose coordinates fall is walked from its end, so that they grow to the right and upwards.
  const along = ({ axis, i }: { axis: Axis; i: number }, k: number) => (falls(axis) ? axis.count - 1 - k : k) * strides[i];
  if (!second) return { x: rising(first.axis), y: null, values: Array.from({ length: first.axis.count }, (_, k) => values[start + along(first, k)]) };
  const [right, up] = pointsUp(first.axis.name, second.axis.name) ? [first, second] : [second, first];
  const picture: (number | null)[] = [];
  for (let j = 0; j < up.axis.count; j += 1) for (let i = 0; i < right.axis.count; i += 1) picture.push(values[start + along(up, j) + along(right, i)]);
  return { x: rising(right.axis), y: rising(up.axis), values: picture };
}

const falls = ({ nodes, count }: Axis) => nodes !== null && count > 1 && nodes.length === count && nodes[0] > nodes[count - 1];

const rising = (axis: Axis): Axis => (axis.nodes && falls(axis) ? { ...axis, nodes: [...axis.nodes].reverse() } : axis);

/** Does the second axis point up? By the alphabet where both names end in a letter of x, y, z; else the last axis runs to the right. */
function pointsUp(first: string, second: string): boolean {
  const letter = (name: string) => /[xyz]$/i.exec(name)?.[0].toLowerCase();
  const [a, b] = [letter(first), letter(second)];
  return a !== undefined && b !== undefined && a < b;
}
