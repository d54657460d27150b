/** Remedies that the recipe's steps of contract/recipe.ts can carry out. */
import type { Remedy } from '#contract/finding.ts';
import type { TimeRuleId } from '#contract/weights.ts';
import type { CheckSubject } from './check.ts';

/** Nil UUID (RFC 9562, section 5.9): in a drop list it stands for the archive that the finding is about. */
export const thisArchive = '00000000-0000-0000-0000-000000000000';

export function dropSnapshots(subject: CheckSubject, indices: ArrayLike<number>, sentence: string): Remedy {
  return {
    step: 'order',
    parameters: { drop: [{ archive: subject.archive ?? thisArchive, indices: Array.from(indices) }] },
    sentence,
  };
}

export function orderRecord(
  parameters: { sort?: true; restart?: 'keep-later' | 'keep-earlier'; dropDuplicates?: true; dropFrozen?: true },
  sentence: string,
): Remedy {
  return { step: 'order', parameters, sentence };
}

export function windowRecord(from: number | null, to: number | null, sentence: string): Remedy {
  return { step: 'window', parameters: { from, to }, sentence };
}

export function weighTime(time: TimeRuleId, sentence: string): Remedy {
  return { step: 'weigh', parameters: { time }, sentence };
}

/** `archives` of the select step stay as the recipe has them. */
export function keepFields(fields: string[], sentence: string): Remedy {
  return { step: 'select', parameters: { fields }, sentence };
}
