/** One entry; before and after are folded away. */
import type { AuditEntry } from '#contract/operation.ts';
import { TimeStamp } from '../../components/TimeStamp.tsx';

export function AuditEntryRow({ entry }: { entry: AuditEntry }) {
  const changed = entry.before !== null || entry.after !== null;
  return (
    <li className="grid gap-x-6 gap-y-1 py-2.5 text-sm md:grid-cols-[4rem_11rem_11rem_1fr]">
      <span className="font-mono text-ink-soft tabular-nums">{entry.seq}</span>
      <TimeStamp at={entry.at} />
      <span>{entry.actor?.name ?? 'somebody'}{entry.via !== 'session' && <span className="text-ink-soft"> by {entry.via}</span>}</span>
      <div className="min-w-0">
        <p><code className="font-mono">{entry.action}</code> {entry.label}{entry.campaign && <span className="text-ink-soft"> in {entry.campaign}</span>}</p>
        {entry.reason && <p className="text-pretty text-ink-soft">Reason: {entry.reason}</p>}
        {changed && (
          <details>
            <summary className="cursor-pointer text-ink-soft">Before and after</summary>
            <pre tabIndex={0} aria-label={`Before and after of entry ${entry.seq}`} className="mt-1 max-h-64 overflow-auto bg-paper-raised p-2 font-mono text-xs">{JSON.stringify({ before: entry.before, after: entry.after }, null, 2)}</pre>
            <p className="font-mono text-xs break-all text-ink-soft">{entry.hash}</p>
          </details>
        )}
      </div>
    </li>
  );
}
