/** Names that an archive itself gives to the axes of an array: dimension scales, or a list in an attribute. */
import type { ArrayInfo, AxisName } from '#contract/reading.ts';
import { labelledAxis } from './array-names.ts';

export interface AxisLabel {
  axis: AxisName;
  why: string;
}

/** DIMENSION_LABELS: HDF5 dimension scale specification 1.4; _ARRAY_DIMENSIONS: Zarr and xarray; the others are common practice. */
const listAttributes = ['DIMENSION_LABELS', '_ARRAY_DIMENSIONS', 'dimensions', 'dims', 'axes', 'dimension_names', 'dim_order', 'axis_order'];

function listOf(value: unknown, axes: number): string[] | null {
  if (Array.isArray(value) && value.length === axes && value.every((part) => typeof part === 'string')) return value;
  if (typeof value !== 'string') return null;
  const parts = value.split(/[\s,;()[\]'"]+/).filter(Boolean);
  if (parts.length === axes) return parts;
  // 'tyx': a letter an axis
  return parts.length === 1 && parts[0].length === axes ? [...parts[0]] : null;
}

/** `known`: arrays whose axis is certain already, by path. */
export function labelsOf(info: ArrayInfo, known: Map<string, AxisName>): (AxisLabel | null)[] {
  const labels: (AxisLabel | null)[] = info.shape.map((_, i) => {
    const scale = info.dimensionScales?.[i];
    if (!scale) return null;
    const axis = known.get(scale) ?? labelledAxis(scale);
    return axis && { axis, why: `dimension scale ${scale}` };
  });
  for (const name of listAttributes) {
    const list = listOf(info.attributes[name], info.shape.length);
    list?.forEach((label, i) => {
      const axis = labelledAxis(label);
      if (axis) labels[i] ??= { axis, why: `attribute ${name}` };
    });
  }
  // The same name twice says nothing.
  return labels.map((label, i) => (label && labels.findIndex((other) => other?.axis === label.axis) === i ? label : null));
}
