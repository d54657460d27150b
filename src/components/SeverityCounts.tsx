/** How many open findings of each severity; zeros are left out. */
import type { Severity } from '#contract/finding.ts';
import { MarkShape } from './MarkShape.tsx';

const order: Severity[] = ['blocker', 'caution', 'note'];

export function SeverityCounts({ counts }: { counts: Record<Severity, number> & { waived?: number } }) {
  const shown = order.filter((severity) => counts[severity] > 0);
  const waived = counts.waived ?? 0;
  if (shown.length === 0 && waived === 0) return <span className="inline-flex items-center gap-1.5 text-sm text-verdigris"><MarkShape kind="sound" /> no open finding</span>;
  const words = (severity: Severity) => `${counts[severity]} ${severity}${counts[severity] === 1 ? '' : 's'}`;
  return (
    <span className="inline-flex flex-wrap items-center gap-x-3 gap-y-0.5 text-sm tabular-nums">
      {shown.map((severity) => (
        <span key={severity} className="inline-flex items-center gap-1.5 whitespace-nowrap" title={words(severity)}>
          <MarkShape kind={severity} />
          <span aria-hidden>{counts[severity]}</span>
          <span className="sr-only">{words(severity)}</span>
        </span>
      ))}
      {waived > 0 && <span className="whitespace-nowrap text-ink-soft">{waived} waived</span>}
    </span>
  );
}
