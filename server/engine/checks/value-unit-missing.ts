/** value/unit-missing: a field without a unit. "1" and "-" are units: they say that the field is dimensionless. */
import type { Check } from './check.ts';

export const valueUnitMissing: Check = {
  id: 'value/unit-missing',
  severity: 'caution',
  title: 'Each field has a unit',
  source: 'CF Conventions, section 3.1 (units)',
  thresholds: {},
  judge({ survey, demands }) {
    return (survey?.reading.fields ?? [])
      .filter((field) => field.unit === null || field.unit.trim() === '')
      .map((field) => {
        const expected = demands.fields.find((demand) => demand.name === field.name)?.unit ?? null;
        return {
          path: field.path,
          message: `The field ${field.name} (${field.path}) has no unit; give it in the reading${expected ? `, the campaign expects ${expected}` : ' ("1" if it is dimensionless)'}.`,
          evidence: { field: field.name, ...(expected ? { expected } : {}) },
          remedy: null,
        };
      });
  },
};
