/** Which axis of an array is time, by all that speaks for and against each. */
import type { ArrayInfo } from '#contract/reading.ts';
import type { AxisLabel } from './axis-labels.ts';
import type { Evidence } from './evidence.ts';
import type { Coordinate, TimeVector } from './vectors.ts';

export interface TimeAxis {
  axis: number;
  why: string;
  /** nothing tells it from another axis */
  uncertain: boolean;
}

const decided = 100;

export function timeAxisOf(
  info: ArrayInfo,
  labels: (AxisLabel | null)[],
  time: TimeVector | null,
  coordinates: Coordinate[],
  evidence: Evidence,
): TimeAxis | null {
  const { shape, chunks } = info;
  const unlimited = evidence.unlimited(info.path);
  const explained = shape.map((size) => coordinates.some((one) => !one.edges && one.length === size));
  const others = (i: number) => shape.map((_, k) => k).filter((k) => k !== i);

  const judged = shape.map((size, i) => {
    const reasons: string[] = [];
    let score = 0;
    const add = (points: number, reason: string) => {
      score += points;
      if (reason) reasons.push(reason);
    };
    const label = labels[i];
    if (label) add(label.axis === 'time' ? decided : -decided, label.why);
    if (time) {
      if (size === time.length) add(10, `its length ${size} is that of ${time.info.path}`);
      else if (label?.axis !== 'time') add(-decided, '');
    }
    if (unlimited?.[i] && others(i).every((k) => !unlimited[k])) add(6, 'it alone may grow without limit');
    if (chunks && chunks[i] === 1 && size > 1 && others(i).some((k) => chunks[k] > 1) && others(i).every((k) => chunks[k] > 1 || shape[k] === 1)) {
      add(5, `chunks (${chunks.join(', ')}) hold one index of it each`);
    }
    if (explained[i]) add(-3, '');
    else if (shape.length > 1 && others(i).every((k) => explained[k] || labels[k])) add(4, 'the other axes are those of coordinates');
    if (!time && shape.length === 2 && !explained[i] && size < shape[1 - i]) add(2, 'it is the shorter axis of a matrix');
    // The usual order when nothing else speaks: frame after frame.
    if (i === 0) add(1, '');
    return { axis: i, score, reasons };
  });
  judged.sort((a, b) => b.score - a.score);
  const [best, second] = judged;
  if (!best || best.score < 0) return null;
  // Without a time vector and without a sign of its own, an axis that a coordinate explains is no time axis.
  if (!time && best.score < 2 && explained[best.axis]) return null;
  if (!time && best.score < 2 && shape.length < 3) return null;
  const uncertain = best.score < 4 || (second !== undefined && second.score > -decided / 2 && best.score - second.score < 3);
  const where = best.axis === 0 ? 'first' : best.axis === shape.length - 1 ? 'last' : `number ${best.axis + 1}`;
  const reason = best.reasons.length > 0 ? best.reasons.join('; ') : 'it is the first axis, and nothing says otherwise';
  const rivals = second && uncertain && second.score > -decided / 2 ? `; axis ${second.axis + 1} of length ${shape[second.axis]} would do as well` : '';
  return { axis: best.axis, uncertain, why: `${uncertain ? 'uncertain: ' : ''}time is the ${where} axis: ${reason}${rivals}` };
}
