/** Spatial weights of a state: the fields of a reading stacked, each with the weights of its own axes. */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, FieldReading, Reading } from '#contract/reading.ts';
import type { SpaceRuleId, SpaceRuleResult } from '#contract/weights.ts';
import { spaceWeights } from '../engine/space/space-weights.ts';
import type { SurveyAxis } from '../engine/survey.ts';
import { defaultLimits } from '../reading/limits.ts';

interface Grid {
  axes: SurveyAxis[];
  spaceWeights: Float64Array | null;
}

/** Shape of one snapshot of a field: without the time axis; of a template ('{step}') that of any step. */
function snapshotShape(
  contents: ArchiveContents,
  field: FieldReading,
): { name: FieldReading['axes'][number]; count: number }[] {
  const pattern = field.path.split('{step}');
  const array = contents.arrays.find(({ path }) =>
    pattern.length === 1
      ? path === field.path
      : path.startsWith(pattern[0]) && path.endsWith(pattern[1]) && path !== field.path,
  );
  return field.axes.map((name, i) => ({ name, count: array?.shape[i] ?? 0 })).filter(({ name }) => name !== 'time');
}

/** The axes of one field in storage order, a component axis included. */
export function fieldAxes(contents: ArchiveContents, grid: Grid, field: FieldReading): SurveyAxis[] {
  return snapshotShape(contents, field).map(
    ({ name, count }): SurveyAxis =>
      grid.axes.find((axis) => axis.name === name && axis.count === count) ?? {
        name,
        count,
        path: null,
        unit: null,
        nodes: null,
        edges: null,
        dtype: null,
        periodic: null,
      },
  );
}

/** The rule for a grid when none is asked for: the archive's own weights, else the coordinates', else equal weights. */
export function spaceRuleFor(axes: SurveyAxis[], grid: Grid): SpaceRuleId {
  if (grid.spaceWeights) return 'provided';
  const space = axes.filter((axis) => axis.name !== 'component');
  return space.length > 0 && space.every((axis) => axis.nodes !== null && axis.name !== 'node') ? 'tensor' : 'none';
}

/** Weights of all fields one after the other; `result` is that of the first field. */
export function stateWeights(
  contents: ArchiveContents,
  reading: Reading,
  grid: Grid,
  rule: SpaceRuleId | null,
): { weights: Float64Array; result: SpaceRuleResult } {
  let nodes = 0;
  const parts = reading.fields.map((field) => {
    const axes = fieldAxes(contents, grid, field);
    nodes += axes.reduce((product, axis) => product * axis.count, 1);
    if (nodes * 8 > defaultLimits.snapshotBytes) {
      throw new PennyweightError(
        'limit-exceeded',
        `One snapshot of all fields has ${nodes} values with ${field.path}, and ${defaultLimits.snapshotBytes / 8} is the most that is weighed here: leave fields out of the reading.`,
        { path: field.path, nodes },
      );
    }
    return spaceWeights(rule ?? spaceRuleFor(axes, grid), axes, grid.spaceWeights);
  });
  const weights = new Float64Array(parts.reduce((sum, part) => sum + part.weights.length, 0));
  let at = 0;
  for (const part of parts) {
    weights.set(part.weights, at);
    at += part.weights.length;
  }
  return { weights, result: parts[0].result };
}
