/** The form of a space rule. One file a rule; the catalogue (index.ts) is the only other place that names it. */
import type { SpaceRuleId, SpaceRuleResult } from '#contract/weights.ts';
import type { Grid } from './grid.ts';

export interface SpaceWeights {
  /** length = nodes x components, C order of the reading's axes without time */
  weights: Float64Array;
  result: SpaceRuleResult;
}

export interface SpaceRule {
  id: SpaceRuleId;
  title: string;
  source: string;
  /**
   * `provided`: the weights that the archive brings, null when it brings none. Errors: 'rule-not-admissible' when the rule needs
   * what the archive does not have; 'weights-invalid' with index and value.
   */
  weights(grid: Grid, provided: Float64Array | null): SpaceWeights;
}
