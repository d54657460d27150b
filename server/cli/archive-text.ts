/** One checked archive as text for a person: what was read, then the findings with their remedies. */
import type { ArchiveReport } from '#contract/check-report.ts';

const units = ['bytes', 'KiB', 'MiB', 'GiB', 'TiB'];

export function bytesText(bytes: number): string {
  const power = bytes < 1024 ? 0 : Math.min(units.length - 1, Math.floor(Math.log2(bytes) / 10));
  return `${power === 0 ? bytes : (bytes / 1024 ** power).toPrecision(3)} ${units[power]}`;
}

function readingLines({ reading }: ArchiveReport): string[] {
  if (!reading) return [];
  const { time, fields, axes } = reading;
  const unit = (text: string | null) => (text ? `, ${text}` : '');
  return [
    time ? `  time    ${time.path ?? 'given'}: ${time.count} stamps${unit(time.unit)}` : '  time    none',
    ...fields.map(
      (field) =>
        `  field   ${field.path} [${field.shape.join(', ')}] ${field.dtype}, axes ${field.axes.join(' ')}${unit(field.unit)}`,
    ),
    ...axes.map(
      (axis) =>
        `  axis    ${axis.name}${axis.path ? ` ${axis.path}` : ''}: ${axis.count}${axis.uniform === null ? '' : axis.uniform ? ', uniform' : ', uneven'}`,
    ),
  ];
}

export function archiveText(report: ArchiveReport): string {
  const names = report.files.length === 1 ? report.file : `${report.file} and ${report.files.length - 1} more`;
  const findings = report.findings.flatMap((finding) => [
    `  ${finding.severity.padEnd(7)} ${finding.id}${finding.path ? `  ${finding.path}` : ''}`,
    `          ${finding.message}`,
    ...(finding.remedy ? [`          Remedy: ${finding.remedy.sentence}`] : []),
  ]);
  return [
    `${names}  (${report.format ?? 'not read'}, ${bytesText(report.bytes)})`,
    `  sha256  ${report.sha256}`,
    ...readingLines(report),
    ...(findings.length > 0 ? findings : ['  Nothing to report.']),
  ].join('\n');
}
