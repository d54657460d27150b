/** pennyweight check: reads archives without a server and reports what it finds. */
import type { CheckReport } from '#contract/check-report.ts';
import { checkPolicy } from '#contract/finding.ts';
import { catalogue } from '../../engine/checks/index.ts';
import { unknownThresholds } from '../../engine/checks/policy.ts';
import { groupArchives } from '../archive-files.ts';
import { archiveText } from '../archive-text.ts';
import { checkArchive } from '../checked-archive.ts';
import type { Command } from '../command.ts';
import { statusOfFindings } from '../exit-status.ts';
import { readJsonFile } from '../json-file.ts';
import { readingChoice, readingHelp, readingOptions } from '../reading-choice.ts';
import { parseArguments, wrongUsage } from '../usage.ts';
import { version } from '../version.ts';

const help = `Usage: pennyweight check FILE… [--reading FILE] [--time-start T --time-step DT | --ensemble] [--policy FILE] [--json]

Reads HDF5 and NPY archives and reports what would stand in the way of training on them. NPY files of one folder form one
archive when one of them is a time vector by name (t, time, times or stamps).

${readingHelp}
  --policy FILE      thresholds that differ from the defaults (JSON), e.g. {"thresholds": {"time/gap": {"ratio": 5}}}
  --json             one JSON object and nothing else

Exit status: 0 nothing above a note, 1 a caution, 2 a blocker, 64 wrong usage, 70 internal error.

Example: pennyweight check run.h5 --json > run.findings.json`;

export const command: Command = {
  summary: 'check archives: file, reading, time, grid, values',
  help,
  async run(args, terminal) {
    const { values, positionals } = parseArguments(args, {
      ...readingOptions,
      policy: { type: 'string' },
      json: { type: 'boolean' },
    });
    const choice = readingChoice(values);
    const policy =
      values.policy === undefined ? { thresholds: {} } : readJsonFile('--policy', values.policy, checkPolicy);
    const [unknown] = unknownThresholds(catalogue, policy);
    if (unknown) throw wrongUsage(unknown);
    const report: CheckReport = { pennyweight: version(), archives: [] };
    for (const files of groupArchives(positionals)) {
      const archive = await checkArchive(files, choice, policy, terminal);
      report.archives.push(archive);
      if (!values.json) terminal.result(`${report.archives.length > 1 ? '\n' : ''}${archiveText(archive)}`);
    }
    if (values.json) terminal.result(JSON.stringify(report));
    return statusOfFindings(report.archives.flatMap((archive) => archive.findings));
  },
};
