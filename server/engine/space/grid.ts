/** The space axes of one field as the space rules see them. */
import { describeSpacing } from '../quadrature/spacing.ts';
import { accurateSum } from '../quadrature/stamps.ts';
import type { SurveyAxis } from '../survey.ts';
import { axisTrapezoid, firstNotMonotone } from './axis-weights.ts';

export interface Grid {
  /** in storage order, a 'component' axis where it stands */
  axes: readonly SurveyAxis[];
  /** the same without components */
  space: readonly SurveyAxis[];
  /** number of values in one snapshot: nodes x components */
  total: number;
  components: number;
  /** product of the axes' lengths; null when coordinates are unknown or not monotone. An axis of one node counts 1. */
  measure: number | null;
}

export function gridOf(axes: readonly SurveyAxis[]): Grid {
  const space = axes.filter((axis) => axis.name !== 'component');
  const known = space.length > 0 && space.every((axis) => hasNodes(axis) && firstNotMonotone(axis.nodes!) < 0);
  const measure = known ? space.reduce((product, axis) => product * lengthOf(axis), 1) : null;
  return {
    axes,
    space,
    total: axes.reduce((total, axis) => total * axis.count, 1),
    components: axes.reduce((count, axis) => count * (axis.name === 'component' ? axis.count : 1), 1),
    measure: measure !== null && Number.isFinite(measure) ? measure : null,
  };
}

/** Coordinates along the axis; 'node' numbers the points of an unstructured grid and has none. */
export function hasNodes(axis: SurveyAxis): boolean {
  return axis.nodes !== null && axis.nodes.length === axis.count && axis.count > 0 && axis.name !== 'node';
}

const lengthOf = (axis: SurveyAxis) => accurateSum(axisTrapezoid(axis.name, axis.nodes!, axis.periodic === true));

/** Axes whose spacing varies by more than the precision of the coordinates explains; all coordinates strictly monotone. */
export function unevenAxes({ space }: Grid): SurveyAxis[] {
  return space.filter(({ nodes, dtype }) => {
    const ascending = nodes![0] > nodes![nodes!.length - 1] ? nodes!.map((value) => -value) : nodes!;
    const { uniform, roundedOnly } = describeSpacing(ascending, dtype);
    return !uniform && !roundedOnly;
  });
}
