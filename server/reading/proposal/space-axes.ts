/** Names for the axes of an array beside time: by label, by the coordinate of the same length, or by convention. */
import type { ArrayInfo, AxisName } from '#contract/reading.ts';
import { namesVector } from './array-names.ts';
import type { AxisLabel } from './axis-labels.ts';
import type { Coordinate } from './vectors.ts';

export interface SpaceAxes {
  names: AxisName[];
  uncertain: boolean;
  why: string;
}

const rank: AxisName[] = ['x', 'lon', 'r', 'y', 'lat', 'theta', 'z', 'phi'];
const plain: AxisName[] = ['x', 'y', 'z'];
const mostAxes = 5;

/** Names of all axes, or null where they cannot be space. `timeAxis` -1: the array is one snapshot. */
export function spaceAxesOf(info: ArrayInfo, labels: (AxisLabel | null)[], timeAxis: number, coordinates: Coordinate[]): SpaceAxes | null {
  const { shape } = info;
  const names: (AxisName | null)[] = shape.map((_, i) => (i === timeAxis ? 'time' : labels[i] && labels[i].axis !== 'time' ? labels[i].axis : null));
  const reasons: string[] = [];
  let uncertain = false;
  const labelled = labels.find((label, i) => label && i !== timeAxis);
  if (labelled) reasons.push(`axes named by ${labelled.why}`);
  const usable = coordinates.filter(({ edges, axis }) => !edges && !names.includes(axis));
  const matching = (size: number) => usable.filter(({ length }) => length === size);

  // Components: a short axis at either end that no coordinate explains.
  const open = () => shape.map((_, i) => i).filter((i) => names[i] === null);
  for (const i of [shape.length - 1, shape[0] !== undefined && timeAxis === 0 ? 1 : 0]) {
    const size = shape[i];
    const short = size === 2 || size === 3 || (size <= 9 && namesVector(info.path));
    if (open().length < 2 || names[i] !== null || names.includes('component') || !short || size < 2 || matching(size).length > 0) continue;
    names[i] = 'component';
    reasons.push(`the axis of length ${size} holds components`);
  }

  const rest = open();
  if (rest.length > mostAxes) return null;
  if (rest.length === 1 && nameNodes(shape[rest[0]], usable, names, rest[0], reasons)) {
    return { names: names as AxisName[], uncertain, why: reasons.join('; ') };
  }
  // Fastest axis first names x in "time first" order (t, z, y, x), slowest first in "time last" order (x, y, z, t).
  const reversed = timeAxis <= 0;
  const order = reversed ? rest.toReversed() : rest;
  const found = matchings(order.map((i) => shape[i]), usable);
  if (found.length > 0) {
    const [first] = found;
    order.forEach((i, k) => (names[i] = first[k]?.axis ?? null));
    const used = first.filter((one) => one !== null);
    if (used.length > 0) reasons.push(`${used.map(({ axis, length, info: { path } }) => `${axis} by the length ${length} of ${path}`).join(', ')}`);
    if (found.length > 1 && found[1].filter(Boolean).length === used.length) {
      uncertain = true;
      reasons.push(`uncertain: coordinates of equal length could be exchanged, so the usual order (${reversed ? 't, z, y, x' : 'x, y, z, t'}) was taken`);
    }
  }
  const left = reversed ? open().toReversed() : open();
  const free = plain.filter((name) => !names.includes(name));
  if (left.length > free.length) return null;
  if (left.length > 0) {
    left.forEach((i, k) => (names[i] = free[k]));
    reasons.push(`${left.length === 1 ? 'an axis' : 'axes'} without coordinates named in the usual order`);
  }
  return { names: names as AxisName[], uncertain, why: reasons.join('; ') };
}

/** The only space axis counts nodes unless exactly one coordinate has its length. */
function nameNodes(size: number, usable: Coordinate[], names: (AxisName | null)[], at: number, reasons: string[]): boolean {
  const same = usable.filter(({ length }) => length === size);
  const alone = !names.some((name) => name !== null && name !== 'time' && name !== 'component');
  if (same.length === 1 || !alone) return false;
  names[at] = 'node';
  const products = usable.reduce((sizes, { length }) => sizes.concat(sizes.map((product) => product * length)), [1]);
  if (same.length > 1) reasons.push(`nodes: ${same.map(({ info }) => info.path).join(' and ')} give one value a node`);
  else if (usable.length > 1 && products.includes(size)) reasons.push(`nodes: its length ${size} is the product of the coordinates' lengths, a grid written as one axis`);
  else reasons.push(`nodes: no coordinate has the length ${size}`);
  return true;
}

/**
 * Ways to give each size a coordinate of that length, each axis once; null where none fits. Best first: most axes
 * explained, then the order of `rank` from the first size on.
 */
function matchings(sizes: number[], coordinates: Coordinate[]): (Coordinate | null)[][] {
  let partial: (Coordinate | null)[][] = [[]];
  for (const size of sizes) {
    partial = partial.flatMap((taken) => {
      const fitting = coordinates.filter((one) => one.length === size && !taken.some((other) => other?.axis === one.axis));
      return fitting.length > 0 ? fitting.map((one) => [...taken, one]) : [[...taken, null]];
    });
  }
  const disorder = (one: (Coordinate | null)[]) => {
    const ranks = one.map((coordinate) => (coordinate ? rank.indexOf(coordinate.axis) : -1)).filter((value) => value >= 0);
    return ranks.reduce((sum, value, i) => sum + ranks.slice(i + 1).filter((later) => later < value).length, 0);
  };
  const missing = (one: (Coordinate | null)[]) => one.filter((coordinate) => coordinate === null).length;
  const distinct = new Map(partial.map((one) => [one.map((coordinate) => coordinate?.axis ?? '').join(), one]));
  return [...distinct.values()].sort((a, b) => missing(a) - missing(b) || disorder(a) - disorder(b));
}
