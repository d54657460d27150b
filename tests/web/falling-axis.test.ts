/** Coordinates that fall in the file, as latitudes from north to south often do, must not turn the picture over. */
import { describe, expect, it } from 'vitest';
import { cellAt, cellBorders } from '../../src/plots/field-geometry.ts';
import { sliceOf } from '../../src/plots/field-slice.ts';

const axis = (name: string, nodes: number[] | null, count = nodes!.length) => ({ name, unit: 'm', count, nodes });
/** value = 100 y + x, so that each says where it belongs */
const field = (ys: number[], xs: number[]) => ys.flatMap((y) => xs.map((x) => 100 * y + x));

describe('a field on an axis whose coordinates fall', () => {
  const rows: [string, number[], number[]][] = [
    ['neither', [0, 1, 3], [0, 2]],
    ['y', [3, 1, 0], [0, 2]],
    ['x', [0, 1, 3], [2, 0]],
    ['both', [3, 1, 0], [2, 0]],
  ];
  it.each(rows)('shows each value at its coordinates (falling: %s)', (_, ys, xs) => {
    const { x, y, values } = sliceOf({ axes: [axis('y', ys), axis('x', xs)], values: field(ys, xs) }, null);
    expect(x.nodes).toEqual([0, 2]);
    expect(y!.nodes).toEqual([0, 1, 3]);
    y!.nodes!.forEach((up, j) => x.nodes!.forEach((right, i) => expect(values[j * x.count + i]).toBe(100 * up + right)));
    // The top of the picture is the largest y, also by the borders of its cells.
    expect(cellAt(cellBorders(y!.nodes, y!.count), 0.99)).toBe(2);
  });

  it('in a layer of three axes and along a line as well', () => {
    const values = [10, 11, 12, 20, 21, 22];
    expect(sliceOf({ axes: [axis('z', [0, 1]), axis('y', [5, 4, 3])], values }, { axis: 0, index: 1 })).toMatchObject({ x: { nodes: [3, 4, 5] }, y: null, values: [22, 21, 20] });
    const block = sliceOf({ axes: [axis('z', [1, 0]), axis('y', [0, 1]), axis('x', [0, 1])], values: [0, 1, 2, 3, 4, 5, 6, 7] }, { axis: 0, index: 0 });
    expect(block.values).toEqual([0, 1, 2, 3]);
  });

  it('leaves an axis without coordinates, and one that goes to and fro, in the order of storage', () => {
    expect(sliceOf({ axes: [axis('y', null, 2), axis('x', null, 2)], values: [1, 2, 3, 4] }, null).values).toEqual([1, 2, 3, 4]);
    expect(sliceOf({ axes: [axis('x', [0, 2, 1])], values: [1, 2, 3] }, null).values).toEqual([1, 2, 3]);
  });
});
