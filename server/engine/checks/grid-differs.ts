/**
 * grid/differs: another archive of the same dataset or campaign has another grid: other axes, other lengths, or nodes that
 * differ by more than the rounding of the coarser stored type, 2 units of round-off of the axis' largest coordinate.
 * A type that is not known is taken as float32 when every coordinate is a float32. Unknown coordinates cannot differ
 * (grid/missing speaks of them).
 */
import type { ElementType } from '#contract/reading.ts';
import type { Check, CheckSubject } from './check.ts';
import { evidenceLength } from './evidence.ts';
import { counted, plainNumber } from './quantity.ts';
import { gridOf, roundOff } from './space-axes.ts';

export interface Grid {
  name: string;
  nodes: Float64Array | null;
  count: number;
  dtype?: ElementType | null;
}

function storedRoundOff(axis: Grid): number {
  if (axis.dtype) return roundOff(axis.dtype);
  return axis.nodes && axis.nodes.every((value) => Math.fround(value) === value)
    ? roundOff('float32')
    : roundOff('float64');
}

/** One clause that says how they differ, or null when they are the same. */
function difference(ours: Grid, theirs: Grid): string | null {
  if (ours.count !== theirs.count)
    return `the axis ${ours.name} has ${ours.count} nodes here and ${theirs.count} there`;
  if (!ours.nodes || !theirs.nodes) return null;
  const scale = [ours.nodes, theirs.nodes].reduce(
    (most, nodes) => nodes.reduce((a, value) => Math.max(a, Math.abs(value)), most),
    0,
  );
  const tolerance = 2 * Math.max(storedRoundOff(ours), storedRoundOff(theirs)) * scale;
  for (let i = 0; i < ours.nodes.length; i++) {
    if (Math.abs(ours.nodes[i] - theirs.nodes[i]) > tolerance) {
      return `node ${i} of the axis ${ours.name} lies at ${plainNumber(ours.nodes[i], 9)} here and at ${plainNumber(theirs.nodes[i], 9)} there`;
    }
  }
  return null;
}

export function compareGrids(ours: Grid[], theirs: Grid[]): string | null {
  for (const axis of ours) {
    const other = theirs.find((candidate) => candidate.name === axis.name);
    const clause = other ? difference(axis, other) : `the axis ${axis.name} is missing there`;
    if (clause) return clause;
  }
  const extra = theirs.find(
    (candidate) =>
      candidate.name !== 'component' && candidate.name !== 'time' && !ours.some((axis) => axis.name === candidate.name),
  );
  return extra ? `the axis ${extra.name} exists only there` : null;
}

export const gridDiffers: Check = {
  id: 'grid/differs',
  severity: 'blocker',
  title: 'All archives of the set are on one grid',
  source: 'common practice, no source',
  thresholds: {},
  judge({ survey, otherGrids }: CheckSubject) {
    if (!survey || otherGrids.length === 0) return [];
    const ours = gridOf(survey);
    if (ours.length === 0) return [];
    const differing = otherGrids.flatMap(({ archive, axes }) => {
      const clause = compareGrids(ours, axes);
      return clause ? [{ archive, clause }] : [];
    });
    if (differing.length === 0) return [];
    const [{ archive, clause }] = differing;
    return [
      {
        path: null,
        message: `The grid differs from that of ${differing.length === 1 ? archive : `${counted(differing.length, 'other archive')}, first ${archive}`}: ${clause}; regrid outside, or leave the archive out.`,
        evidence: {
          count: differing.length,
          archives: differing.slice(0, evidenceLength).map((other) => other.archive),
          difference: clause,
        },
        remedy: null,
      },
    ];
  },
};
