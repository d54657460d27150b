/** The steps in words. */
import type { RecipeStep, StepName } from '#contract/recipe.ts';

export const stepTitles: Record<StepName, string> = {
  select: 'Select runs and fields', order: 'Order in time', window: 'Window', centre: 'Centre', weigh: 'Weigh', split: 'Split', cast: 'Cast',
};

const restarts = { 'keep-later': 'on a restart the later segment is kept', 'keep-earlier': 'on a restart the earlier segment is kept', refuse: 'a restart is refused' };
const subtracted = { nothing: 'Nothing is subtracted.', 'weighted-mean': 'The weighted time mean over all runs is subtracted.', 'weighted-mean-per-run': "Each run's own weighted time mean is subtracted.", 'first-snapshot': 'The first snapshot is subtracted.' };

/** What a step says, for those who may only read it. */
export function stepSentence(step: RecipeStep, sources: { archive: string; run: string }[]): string {
  switch (step.step) {
    case 'select': {
      const runs = step.archives.map((id) => sources.find((source) => source.archive === id)?.run ?? id);
      return `Runs ${runs.join(', ')}; fields ${step.fields.join(', ')}.`;
    }
    case 'order': {
      const parts = [step.sort ? 'sorted by time' : 'as stored', restarts[step.restart], step.dropDuplicates ? 'repeated stamps are dropped' : 'repeated stamps stay', step.dropFrozen ? 'frozen copies are dropped' : 'frozen copies stay'];
      const listed = step.drop.reduce((sum, each) => sum + each.indices.length, 0);
      return `Snapshots ${parts.join('; ')}${listed ? `; ${listed} listed snapshots are dropped` : ''}.`;
    }
    case 'window': {
      const parts = [step.from !== null && `from ${step.from}`, step.to !== null && `to ${step.to}`, step.every > 1 && `every ${step.every}th snapshot`, step.first !== null && `the first ${step.first}`, step.last !== null && `the last ${step.last}`].filter(Boolean);
      return parts.length ? `Time window: ${parts.join(', ')}.` : 'The whole record.';
    }
    case 'centre': return subtracted[step.subtract];
    case 'weigh': return `Time rule ${step.time}, space rule ${step.space}, every run with the same total weight.`;
    case 'split': {
      const [train, validation, test] = step.shares.map((share) => `${Math.round(share * 100)} %`);
      return `${step.by === 'run' ? 'Whole runs' : `${step.blocks} blocks of time with ${step.guard} snapshots left out between parts`}: train ${train}, validation ${validation}, test ${test}; seed ${step.seed}.`;
    }
    case 'cast': return `Stored as ${step.type}.`;
  }
}
