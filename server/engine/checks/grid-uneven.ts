/**
 * grid/uneven: the spacing of an axis (of its cell edges, where only these are known) varies by more than its stored type or
 * printed digits explain, so equal weights would be wrong. Says by how much. Axes that are not monotone, and coordinates of
 * a node list, are not judged.
 */
import type { Check } from './check.ts';
import { axisEvenness } from './evenness.ts';
import { plainNumber, withUnit } from './quantity.ts';
import { gridAxes } from './space-axes.ts';

export const gridUneven: Check = {
  id: 'grid/uneven',
  severity: 'note',
  title: 'Each axis is evenly spaced',
  source: 'common practice, no source; tolerances follow from rounding to nearest (IEEE 754-2019)',
  thresholds: {},
  judge({ survey }) {
    if (!survey) return [];
    return gridAxes(survey).flatMap((axis) => {
      const evenness = axisEvenness(axis);
      if (!evenness || evenness.verdict !== 'uneven') return [];
      const { hMin, hMax, ratio } = evenness.spacing;
      return [
        {
          path: axis.path ?? survey.reading.axes.find((candidate) => candidate.name === axis.name)?.edges ?? null,
          message: `The spacing along ${axis.name} varies between ${withUnit(plainNumber(hMin, 4), axis.unit)} and ${withUnit(plainNumber(hMax, 4), axis.unit)}, ${plainNumber(ratio, 3)} to 1: nodes need weights of their own, such as the rule tensor.`,
          evidence: { axis: axis.name, count: axis.count, narrowest: hMin, widest: hMax, ratio },
          remedy: { step: 'weigh', parameters: { space: 'tensor' }, sentence: 'Weigh the nodes by the rule "tensor".' },
        },
      ];
    });
  },
};
