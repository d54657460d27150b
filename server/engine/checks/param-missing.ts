/** param/missing: a campaign parameter has no value for the run. Not judged while the archive, which may hold it, is unreadable. */
import type { Check } from './check.ts';
import { withUnit } from './quantity.ts';

export const paramMissing: Check = {
  id: 'param/missing',
  severity: 'blocker',
  title: "Each of the campaign's parameters has a value",
  source: 'common practice, no source',
  thresholds: {},
  judge({ survey, demands, parameters }) {
    if (!survey) return [];
    return demands.parameters
      .filter(({ name }) => !Object.hasOwn(parameters, name) || !Number.isFinite(parameters[name]))
      .map(({ name, unit, min, max }) => {
        const range =
          min !== null && max !== null
            ? `, between ${withUnit(`${min} and ${max}`, unit)}`
            : unit
              ? `, in ${unit}`
              : '';
        return {
          path: null,
          message: `The parameter ${name} has no value for this run; give it${range}.`,
          evidence: { parameter: name, unit },
          remedy: null,
        };
      });
  },
};
