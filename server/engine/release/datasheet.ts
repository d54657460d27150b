/** The datasheet of a release: what it is, how it was made, what it may be used for, cautions, contacts, citation. */
import { releaseCaution } from './caution.ts';
import { citation, type ReleaseFacts } from './facts.ts';

const percent = (level: string) => `${Number(level) * 100} %`;

export function datasheet(facts: ReleaseFacts): string {
  const { build, dataset, campaign } = facts;
  const lines = [
    `# ${dataset.title}, release ${facts.version}`, '',
    dataset.description || 'No description was given.', '',
    `Campaign: ${campaign.title}. Handling: ${facts.handlingLabel}. Licence: ${facts.licence}. Questions: ${facts.contact}.`, '',
    `> ${releaseCaution}`, '',
    '## What it is', '',
    `A matrix of ${build.rows} rows and ${build.columns} columns in ${build.type}, one snapshot a column (data/matrix.npy, Fortran order; the same in data/release.h5).`, '',
    '| field | unit | rows | grid |', '|---|---|---|---|',
    ...build.fields.map((field) => `| ${field.name} | ${field.unit ?? 'none given'} | ${field.from} to ${field.from + field.count - 1} | ${field.shape.join(' x ')} |`), '',
    '| run | columns | parameters |', '|---|---|---|',
    ...build.records.map((record) => `| ${record.run} | ${record.from} to ${record.from + record.count - 1} | ${Object.entries(record.parameters).map(([name, value]) => `${name} = ${value}`).join(', ') || '-'} |`), '',
    `Split: ${build.split.map(({ part, columns }) => `${part} ${columns}`).join(', ')} (data/split.npy: 0 train, 1 validation, 2 test, 3 left out between parts).`, '',
    '## How it was made', '',
    ...build.steps.map((step, i) => `${i + 1}. ${step.step}: ${step.sentence}`), '',
    `Subtracted: ${build.centred.replaceAll('-', ' ')} (data/mean.npy). Time rule: ${build.timeRule}; the weights (data/time_weights.npy) sum to ${build.duration}. Space rule: ${build.spaceRule.chosen} (data/space_weights.npy). A snapshot is multiplied by the square root of its weight, a row by the square root of its own.`, '',
    `Rank for ${Object.entries(build.spectrum.rank).map(([level, rank]) => `${percent(level)} of the energy: ${rank}`).join('; ')}. ${build.spectrum.resolved} singular values lie above the rounding floor.${build.castError > 0 ? ` Largest rounding error of the cast: ${build.castError.toPrecision(3)}.` : ''}`, '',
    '## Sources', '',
    ...facts.sources.flatMap((source) => source.files.map((file) => `- run ${source.run}, ${file.name}, SHA-256 ${file.sha256}, handed in by ${source.handedInBy.name}`)), '',
    '## Waived cautions', '',
    ...(facts.waivers.length > 0 ? facts.waivers.map((waiver) => `- ${waiver.check}: ${waiver.message} Waived by ${waiver.by.name}: ${waiver.reason}`) : ['None.']), '',
    '## Who', '',
    `Built by ${facts.builtBy.name}, approved by ${facts.approvedBy.name} on ${facts.approvedAt.slice(0, 10)}.${facts.note ? ` ${facts.note}` : ''}`, '',
    `Cite as: ${citation(facts)}`, '',
  ];
  return lines.join('\n');
}
