/** Thresholds as a campaign set them, over the defaults of the checks. */
import type { CheckPolicy } from '#contract/finding.ts';
import type { Check } from './check.ts';

export function thresholdsOf(check: Check, policy: CheckPolicy): Record<string, number> {
  const given = policy.thresholds[check.id] ?? {};
  return Object.fromEntries(
    Object.entries(check.thresholds).map(([name, threshold]) => [name, given[name] ?? threshold.default]),
  );
}

/** What a policy names that no check of the catalogue has: one sentence each, empty when it fits. */
export function unknownThresholds(catalogue: Check[], policy: CheckPolicy): string[] {
  return Object.entries(policy.thresholds).flatMap(([id, thresholds]) => {
    const check = catalogue.find((candidate) => candidate.id === id);
    if (!check) return [`The policy names the check "${id}", which does not exist.`];
    const known = Object.keys(check.thresholds);
    return Object.keys(thresholds)
      .filter((name) => !known.includes(name))
      .map(
        (name) => `The check ${id} has no threshold "${name}"; it has ${known.length > 0 ? known.join(', ') : 'none'}.`,
      );
  });
}
