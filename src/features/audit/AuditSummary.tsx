/** What happened in the shown entries, by action; choosing one filters by it. */
import { useEffect, useState } from 'react';
import type { AuditEntry } from '#contract/operation.ts';
import type { ActionCount } from './action-counts.ts';

function useActionCounts(entries: AuditEntry[]): ActionCount[] {
  const [counts, setCounts] = useState<ActionCount[]>([]);
  useEffect(() => {
    const worker = new Worker(new URL('./action-counts.worker.ts', import.meta.url), { type: 'module' });
    worker.onmessage = (event: MessageEvent<ActionCount[]>) => setCounts(event.data);
    worker.postMessage(entries.map(({ action, actor, at }) => ({ action, actor, at })));
    return () => worker.terminate();
  }, [entries]);
  return counts;
}

export default function AuditSummary({ entries, chosen, onAction }: { entries: AuditEntry[]; chosen: string | null; onAction: (action: string) => void }) {
  const counts = useActionCounts(entries);
  const most = counts[0]?.entries ?? 1;
  if (counts.length === 0) return null;
  return (
    <details className="mb-4" open={chosen !== null}>
      <summary className="cursor-pointer text-sm text-ink-soft">By action</summary>
      <ul className="mt-2 grid gap-x-8 sm:grid-cols-2 lg:grid-cols-3">
        {counts.map((row) => (
          <li key={row.action} className="border-b border-rule py-1 text-sm">
            <button type="button" aria-pressed={chosen === row.action} className="flex w-full cursor-pointer items-center gap-3 text-left hover:text-brass-deep" onClick={() => onAction(chosen === row.action ? '' : row.action)}>
              <code className="min-w-0 flex-1 truncate font-mono">{row.action}</code>
              <span aria-hidden className="h-2 bg-brass" style={{ width: `${(60 * row.entries) / most}px` }} />
              <span className="w-24 text-right tabular-nums">{row.entries} by {row.people}</span>
            </button>
          </li>
        ))}
      </ul>
    </details>
  );
}
