/** Values of one snapshot or mode for the field view: thinned along its axes so that a page can draw them. */
import type { FieldValues } from '#contract/shape.ts';

/** About 256 x 256: more than a screen's width shows of one field. */
const most = 65_536;

export interface GridAxis {
  name: string;
  unit: string | null;
  count: number;
  nodes: Float64Array | null;
}

/** Strides that bring the product of the counts under `most`, taken from the longest axis first. */
function stridesFor(counts: number[]): number[] {
  const strides = counts.map(() => 1);
  const thinned = () => counts.map((count, k) => Math.ceil(count / strides[k]));
  while (thinned().reduce((product, count) => product * count, 1) > most) {
    const now = thinned();
    strides[now.indexOf(Math.max(...now))] *= 2;
  }
  return strides;
}

/** `values` in C order over `axes`. */
export function fieldValues(values: Float64Array, axes: GridAxis[], words: Pick<FieldValues, 'label' | 'field' | 'unit' | 'time' | 'index' | 'count'>): FieldValues {
  const counts = axes.map((axis) => axis.count), strides = stridesFor(counts);
  const steps = new Array<number>(counts.length).fill(1);
  for (let k = counts.length - 2; k >= 0; k--) steps[k] = steps[k + 1] * counts[k + 1];
  const kept: (number | null)[] = [];
  const walk = (axis: number, at: number): void => {
    if (axis === counts.length) {
      kept.push(Number.isFinite(values[at]) ? values[at] : null);
      return;
    }
    for (let i = 0; i < counts[axis]; i += strides[axis]) walk(axis + 1, at + i * steps[axis]);
  };
  walk(0, 0);
  let min = Infinity, max = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    if (value < min) min = value;
    if (value > max) max = value;
  }
  return {
    ...words, values: kept, stride: strides, min: Number.isFinite(min) ? min : null, max: Number.isFinite(max) ? max : null,
    axes: axes.map((axis, k) => ({ name: axis.name, unit: axis.unit, count: Math.ceil(axis.count / strides[k]), nodes: axis.nodes ? Array.from(axis.nodes).filter((_, i) => i % strides[k] === 0) : null })),
  };
}
