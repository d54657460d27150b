/**
 * grid/duplicate-nodes: two nodes at the same place, side by side on an axis or anywhere in a list of nodes.
 * "The same" is exact, or a distance of at most 4 units of round-off of the stored type (a block boundary computed twice)
 * that is also below `share` of the axis' median spacing: a wall grading at the limit of float32 is not that.
 * Coordinates that run through the axis several times (a flattened mesh) are grid/not-monotone's.
 */
import type { Survey, SurveyAxis } from '../survey.ts';
import type { Check, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted } from './quantity.ts';
import { coordinateText, gridAxes, nodeCoordinates, roundOff } from './space-axes.ts';

function coincidentOnAxis(axis: SurveyAxis, nodes: Float64Array, share: number): number[] {
  const distances = Float64Array.from({ length: Math.max(0, nodes.length - 1) }, (_, i) =>
    Math.abs(nodes[i + 1] - nodes[i]),
  );
  const usual = Float64Array.from(distances).sort()[distances.length >> 1] ?? 0;
  const found: number[] = [];
  for (let i = 0; i < distances.length; i++) {
    const rounding = 4 * roundOff(axis.dtype) * Math.max(Math.abs(nodes[i]), Math.abs(nodes[i + 1]));
    if (distances[i] === 0 || (distances[i] <= rounding && distances[i] < share * usual)) found.push(i + 1);
  }
  return found;
}

/** Later index of each pair of nodes with exactly equal coordinates. O(n) by a map. */
function coincidentInList(coordinates: Float64Array[]): number[] {
  const seen = new Set<string>();
  const found: number[] = [];
  for (let i = 0; i < coordinates[0].length; i++) {
    const key = coordinates.map((values) => values[i] + 0).join(',');
    if (seen.has(key)) found.push(i);
    else seen.add(key);
  }
  return found;
}

function judgeList(survey: Survey): Judgement[] {
  const axes = nodeCoordinates(survey);
  if (axes.length === 0) return [];
  const found = coincidentInList(axes.map((axis) => axis.nodes!));
  if (found.length === 0) return [];
  return [
    {
      path: axes[0].path,
      message: `${counted(found.length, 'node coincides', 'nodes coincide')} with an earlier one, first node ${found[0]} at ${axes.map((axis) => coordinateText(axis, axis.nodes![found[0]])).join(', ')}; merge them before handing in.`,
      evidence: evidenceOf(found, null, { axes: axes.map((axis) => axis.name) }),
      remedy: null,
    },
  ];
}

export const gridDuplicateNodes: Check = {
  id: 'grid/duplicate-nodes',
  severity: 'blocker',
  title: 'No two nodes coincide',
  source: 'common practice, no source',
  thresholds: {
    share: {
      default: 1e-3,
      unit: 'median spacing',
      meaning: 'nodes apart by round-off only coincide when their distance is below this share of the usual spacing',
    },
  },
  judge({ survey }, { share }) {
    if (!survey) return [];
    const onAxes = gridAxes(survey).flatMap((axis): Judgement[] => {
      const nodes = axis.nodes ?? axis.edges;
      const found = nodes ? coincidentOnAxis(axis, nodes, share) : [];
      if (!nodes || found.length === 0) return [];
      return [
        {
          path: axis.path,
          message: `${counted(found.length, 'node')} of ${axis.path ?? `the axis ${axis.name}`} ${found.length === 1 ? 'coincides' : 'coincide'} with the one before, first at index ${found[0]} (${coordinateText(axis, nodes[found[0]])}); merge them before handing in, or correct the reading.`,
          evidence: evidenceOf(found, null, { axis: axis.name }),
          remedy: null,
        },
      ];
    });
    return [...onAxes, ...judgeList(survey)];
  },
};
