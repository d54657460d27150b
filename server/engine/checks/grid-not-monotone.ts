/**
 * grid/not-monotone: coordinates or cell edges along an axis turn back, or are no numbers. A descending axis is monotone;
 * equal neighbours are grid/duplicate-nodes' and do not count; coordinates of a node list need no order.
 */
import type { SurveyAxis } from '../survey.ts';
import type { Check, Judgement } from './check.ts';
import { evidenceOf } from './evidence.ts';
import { counted, plainNumber, printedDigits, withUnit } from './quantity.ts';
import { gridAxes } from './space-axes.ts';

/** Positions whose value is not finite, or at which the direction is not that of most steps. */
export function turns(values: Float64Array): { undefinedNodes: number[]; turned: number[] } {
  const undefinedNodes: number[] = [];
  let up = 0;
  let down = 0;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isFinite(values[i])) undefinedNodes.push(i);
    else if (i > 0 && values[i] > values[i - 1]) up++;
    else if (i > 0 && values[i] < values[i - 1]) down++;
  }
  const turned: number[] = [];
  if (up > 0 && down > 0) {
    const sign = up >= down ? 1 : -1;
    for (let i = 1; i < values.length; i++) if (sign * (values[i] - values[i - 1]) < 0) turned.push(i);
  }
  return { undefinedNodes, turned };
}

function judgeValues(axis: SurveyAxis, values: Float64Array, path: string | null, what: string): Judgement[] {
  const { undefinedNodes, turned } = turns(values);
  const text = (i: number) => withUnit(plainNumber(values[i], printedDigits(axis.dtype)), axis.unit);
  const place = path ?? `the axis ${axis.name}`;
  const judgements: Judgement[] = [];
  if (undefinedNodes.length > 0) {
    judgements.push({
      path,
      message: `${counted(undefinedNodes.length, what)} of ${place} ${undefinedNodes.length === 1 ? 'is' : 'are'} NaN or infinite, first at index ${undefinedNodes[0]}; correct the reading or the file.`,
      evidence: evidenceOf(undefinedNodes, null, { axis: axis.name }),
      remedy: null,
    });
  }
  if (turned.length > 0) {
    const [i] = turned;
    judgements.push({
      path,
      message: `The ${what}s of ${place} are not monotone: they turn back in ${counted(turned.length, 'place')}, first at index ${i} from ${text(i - 1)} to ${text(i)}; correct the reading.`,
      evidence: evidenceOf(turned, null, { axis: axis.name }),
      remedy: null,
    });
  }
  return judgements;
}

export const gridNotMonotone: Check = {
  id: 'grid/not-monotone',
  severity: 'blocker',
  title: 'Each axis runs in one direction',
  source: 'CF Conventions, section Terminology: a coordinate variable is in strict monotonic order (from memory)',
  thresholds: {},
  judge({ survey }) {
    if (!survey) return [];
    return gridAxes(survey).flatMap((axis) => {
      const edgesPath = survey.reading.axes.find((candidate) => candidate.name === axis.name)?.edges ?? axis.path;
      const found = axis.nodes ? judgeValues(axis, axis.nodes, axis.path, 'coordinate') : [];
      return found.length === 0 && axis.edges ? judgeValues(axis, axis.edges, edgesPath, 'cell edge') : found;
    });
  },
};
