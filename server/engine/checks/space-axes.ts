/** The space axes as the checks of the grid see them: axes of a structured grid, or coordinates of a list of nodes. */
import type { ElementType } from '#contract/reading.ts';
import type { Survey, SurveyAxis } from '../survey.ts';
import { plainNumber, printedDigits, withUnit } from './quantity.ts';

const noSpace = new Set(['time', 'component', 'node']);

/** Axes along which fields are stored; these have to be monotone. Without any field: all but a node list's. */
export function gridAxes(survey: Survey): SurveyAxis[] {
  const stored = new Set(survey.reading.fields.flatMap((field) => field.axes));
  return survey.axes.filter((axis) => !noSpace.has(axis.name) && (stored.size === 0 || stored.has(axis.name)));
}

/** Coordinates of unstructured nodes: as long as the fields' node axis, and no axis themselves. Empty for a structured grid. */
export function nodeCoordinates(survey: Survey): SurveyAxis[] {
  const node = survey.axes.find((axis) => axis.name === 'node');
  if (!node || !survey.reading.fields.some((field) => field.axes.includes('node'))) return [];
  const structured = new Set(gridAxes(survey));
  return survey.axes.filter((axis) => !structured.has(axis) && axis.nodes !== null && axis.nodes.length === node.count);
}

/** Grid of an archive in the form in which others are compared with it (CheckSubject.otherGrids). */
export function gridOf(
  survey: Survey,
): { name: string; nodes: Float64Array | null; count: number; dtype: ElementType | null }[] {
  const node = survey.axes.find((axis) => axis.name === 'node');
  const axes = new Set([...gridAxes(survey), ...nodeCoordinates(survey), ...(node ? [node] : [])]);
  return [...axes].map(({ name, nodes, count, dtype }) => ({ name, nodes, count, dtype }));
}

/** Unit round-off 2^-p of a stored type (IEEE 754-2019, table 3.1); integers and unknown types count as double. */
export function roundOff(type: ElementType | null): number {
  if (type === 'float16') return 2 ** -11;
  return type === 'float32' || type === 'complex64' ? 2 ** -24 : 2 ** -53;
}

export function coordinateText(axis: SurveyAxis, value: number): string {
  return `${axis.name} = ${withUnit(plainNumber(value, printedDigits(axis.dtype)), axis.unit)}`;
}

/** Where value number `index` of a field's snapshot lies: "x = 0.5 m, y = 0.1 m", or '' when the grid does not tell. */
export function placeText(survey: Survey, fieldPath: string, index: number): string {
  const field = survey.reading.fields.find((candidate) => candidate.path === fieldPath);
  if (!field || index < 0) return '';
  const axes = field.axes.filter((name) => name !== 'time');
  const places: string[] = [];
  let rest = index;
  for (const name of [...axes].reverse()) {
    const axis = survey.axes.find((candidate) => candidate.name === name);
    const count = axis?.count ?? survey.reading.axes.find((candidate) => candidate.name === name)?.count ?? 0;
    if (count === 0) return '';
    const position = rest % count;
    rest = Math.floor(rest / count);
    if (axis?.nodes && position < axis.nodes.length) places.unshift(coordinateText(axis, axis.nodes[position]));
    else if (name === 'node')
      places.unshift(...nodeCoordinates(survey).map((of) => coordinateText(of, of.nodes![position])));
  }
  return rest === 0 ? places.join(', ') : '';
}
