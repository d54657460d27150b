/** The form of a time rule. One file a rule; the catalogue (index.ts) is the only other place that names it. */
import type { TimeRuleId } from '#contract/weights.ts';
import type { Panel } from './panel.ts';
import type { Spacing } from './spacing.ts';

export interface TimeRule {
  id: TimeRuleId;
  title: string;
  source: string;
  /** what the rule takes for granted, tested on the stamps; `why` is one sentence either way */
  assumptions(spacing: Spacing): { holds: boolean; why: string };
  /** Weights (length m, unit of time) on strictly increasing stamps; their sum is the duration, or 1 for a single stamp. O(m). */
  weights(stamps: Float64Array): Float64Array;
  /** The panels that `weights` adds up, for a rule that has some: its degree is then found panel by panel. */
  panels?(stamps: Float64Array): Iterable<Panel>;
}
