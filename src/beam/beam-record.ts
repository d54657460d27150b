/** What the beam draws: one record, or several that stand one after the other. */
import type { Beam } from '#contract/shape.ts';

export type BeamRecord = Beam;

export interface Weights {
  label: string;
  weights: number[];
}

/** On the axis: time, or the index where there are no stamps. */
export interface AxisWindow {
  from: number;
  to: number;
}

export interface BeamProps extends BeamRecord {
  label: string;
  /** weights of another rule to compare with */
  second?: Weights;
  selected?: number | null;
  onSelect?: (index: number | null) => void;
  /** for one record: what is brushed, null for the whole */
  window?: AxisWindow | null;
  onWindow?: (window: AxisWindow | null) => void;
}
