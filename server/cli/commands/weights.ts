/** pennyweight weights: judges the time rules on an archive's stamps, weighs its nodes, and shows the weighted spectrum. */
import { spaceRuleIds, timeRuleIds, type SpaceRuleId, type TimeRuleId } from '#contract/weights.ts';
import { timeRules } from '../../engine/quadrature/index.ts';
import { linearAlgebra } from '../../linalg/choose.ts';
import { groupArchives } from '../archive-files.ts';
import type { Command } from '../command.ts';
import { exitStatus } from '../exit-status.ts';
import { readingChoice, readingHelp, readingOptions } from '../reading-choice.ts';
import { parseArguments, parseCount, wrongUsage } from '../usage.ts';
import { weighArchive } from '../weighed-archive.ts';
import { prepareFolder, writeWeights } from '../weights-files.ts';
import { weightsText } from '../weights-text.ts';

const offeredTime: TimeRuleId[] = [...timeRules.map((rule) => rule.id), 'provided'];
const offeredSpace: SpaceRuleId[] = ['none', 'tensor', 'provided'];
const defaultRank = 10;

const help = `Usage: pennyweight weights FILE [--rule ID|auto] [--space ID] [--rank R] [--time-start T --time-step DT | --ensemble]
                           [--reading FILE] [--json] [--out DIR]

Judges every time rule on the archive's stamps, chooses one, weighs the nodes, and computes the singular values of
W^(1/2) X diag(sqrt a) over all fields as stored (not centred). A rule with a negative weight is refused. NPY files that
form one archive are named together.

  --rule ID          ${offeredTime.join(', ')}, or auto (the default)
  --space ID         ${offeredSpace.join(', ')}; by default what the archive brings, else what its coordinates allow
  --rank R           modes that --out writes, and singular values that the text shows (default ${defaultRank})
${readingHelp}
  --json             one JSON object and nothing else
  --out DIR          a new folder for weights.json, time.npy, time_weights.npy, space_weights.npy, spectrum.csv, modes.npy

Exit status: 0 weighed, 1 the asked rule is refused, 2 the archive cannot be weighed, 64 wrong usage, 70 internal error.

Example: pennyweight weights run.h5 --rule auto --rank 20 --out run-weights`;

function offered<T extends string>(option: string, value: string, known: readonly T[], available: T[]): T {
  if (available.includes(value as T)) return value as T;
  const what = known.includes(value as T) ? `"${value}" is not available yet` : `there is no rule "${value}"`;
  throw wrongUsage(`${option}: ${what}; choose one of ${available.join(', ')}.`);
}

export const command: Command = {
  summary: 'weigh an archive in time and space, show its spectrum',
  help,
  async run(args, terminal) {
    const { values, positionals } = parseArguments(args, {
      ...readingOptions,
      rule: { type: 'string' },
      space: { type: 'string' },
      rank: { type: 'string' },
      json: { type: 'boolean' },
      out: { type: 'string' },
    });
    const choice = readingChoice(values);
    const rule =
      values.rule === undefined || values.rule === 'auto'
        ? null
        : offered('--rule', values.rule, timeRuleIds, offeredTime);
    const space = values.space === undefined ? null : offered('--space', values.space, spaceRuleIds, offeredSpace);
    const rank = values.rank === undefined ? defaultRank : parseCount('--rank', values.rank);
    const [files, ...others] = groupArchives(positionals);
    if (others.length > 0)
      throw wrongUsage(
        'One archive at a time: several files are one archive only when they are NPY files with a time vector among them.',
      );
    if (values.out !== undefined) prepareFolder(values.out);

    const [{ name }] = files;
    const algebra = await linearAlgebra();
    const weighed = await weighArchive(files, {
      choice,
      rule,
      space,
      algebra,
      onShare: (share) => terminal.progress(name, share),
    });
    try {
      terminal.progress(name, null);
      const written = values.out === undefined ? [] : await writeWeights(values.out, weighed, rank, algebra);
      terminal.result(values.json ? JSON.stringify(weighed.report) : weightsText(name, weighed.report, rank));
      if (written.length > 0) terminal.message(`Written to ${values.out}: ${written.join(', ')}.`);
    } finally {
      weighed.matrix.close();
    }
    const { refusal } = weighed;
    if (!refusal) return exitStatus.sound;
    terminal.message(refusal.message);
    return refusal.code === 'matrix-invalid' || refusal.code === 'weights-invalid'
      ? exitStatus.blocker
      : exitStatus.caution;
  },
};
