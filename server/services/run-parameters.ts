/** Parameter values of a run: given by a person, else found in the archive. */
import type { Reading } from '#contract/reading.ts';

export function parametersOf(given: Record<string, number>, reading: Reading | null): Record<string, number> {
  return { ...Object.fromEntries((reading?.parameters ?? []).map(({ name, value }) => [name, value])), ...given };
}
