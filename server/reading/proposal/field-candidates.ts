/** Arrays that may be fields, and the largest set of them on one record and one grid. */
import type { ArrayInfo, AxisName } from '#contract/reading.ts';
import { sizeOf } from '../stored-array.ts';

export interface FieldCandidate {
  /** dataset path, or a template with {step} */
  path: string;
  info: ArrayInfo;
  axes: AxisName[];
  snapshots: number;
  why: string;
}

/** Sizes along the space axes, without components: what fields of one reading share. */
function gridOf({ info, axes }: FieldCandidate): string {
  return axes
    .map((name, i) => ({ name, size: info.shape[i] }))
    .filter(({ name }) => name !== 'time' && name !== 'component')
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .map(({ name, size }) => `${name} ${size}`)
    .join(' x ');
}

/** Those with the record and grid that hold the most values; the others with what keeps them out. */
export function onOneGrid(candidates: FieldCandidate[]): { chosen: FieldCandidate[]; left: { candidate: FieldCandidate; why: string }[] } {
  const weight = new Map<string, number>();
  const key = (one: FieldCandidate) => `${one.snapshots} snapshots, ${gridOf(one)}`;
  for (const one of candidates) weight.set(key(one), (weight.get(key(one)) ?? 0) + sizeOf(one.info.shape) * (one.axes.includes('time') ? 1 : one.snapshots));
  const [best] = [...weight].sort((a, b) => b[1] - a[1])[0] ?? [''];
  return {
    chosen: candidates.filter((one) => key(one) === best),
    left: candidates.filter((one) => key(one) !== best).map((candidate) => ({ candidate, why: `it has ${key(candidate)}, and the larger fields have ${best}` })),
  };
}

/** Names of fields: the last part of the path, more of it where two would be the same. */
export function fieldNames(paths: string[]): string[] {
  const parts = paths.map((path) => path.split('/').filter((part) => part !== '' && part !== '{step}'));
  const short = parts.map((one) => one[one.length - 1]);
  return parts.map((one, i) => (short.filter((name) => name === short[i]).length > 1 ? one.join('_') : short[i]));
}
