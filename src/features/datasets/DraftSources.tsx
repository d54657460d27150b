/** The archives a draft is made of, by SHA-256, and what happened to it. */
import { useOutletContext } from 'react-router-dom';
import { Hash } from '../../components/Hash.tsx';
import { Link } from '../../components/Link.tsx';
import { SeverityCounts } from '../../components/SeverityCounts.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import type { DraftOutlet } from './DraftPage.tsx';

export function DraftSources() {
  const { draft } = useOutletContext<DraftOutlet>();
  return (
    <div className="space-y-8">
      <section aria-labelledby="sources-title" className="space-y-3">
        <h2 id="sources-title" className="text-xl">Source archives</h2>
        <ul className="divide-y divide-rule border-y border-rule">
          {draft.sources.map((source) => (
            <li key={source.archive} className="flex flex-wrap items-baseline gap-x-6 gap-y-1 py-3">
              <Link to={`/archives/${source.archive}`}>{source.run} ({source.name})</Link>
              <span className="text-sm text-ink-soft">handed in by {source.handedInBy.name}{source.state === 'withdrawn' ? '; withdrawn' : ''}</span>
              <SeverityCounts counts={source.findings} />
              <Hash value={source.sha256} label={`SHA-256 of ${source.name}`} />
            </li>
          ))}
        </ul>
        <p className="text-sm text-ink-soft">Made by {draft.makers.map((person) => person.name).join(', ')}: none of them may approve it.</p>
      </section>
      <section aria-labelledby="history-title" className="space-y-3">
        <h2 id="history-title" className="text-xl">History</h2>
        <ol className="space-y-2">
          {draft.history.map((event, i) => (
            <li key={i} className="grid gap-x-4 sm:grid-cols-[12rem_1fr]">
              <span className="text-sm text-ink-soft"><TimeStamp at={event.at} /></span>
              <span>{event.by.name}: {event.what}{event.reason && <span className="block text-sm text-ink-soft">{event.reason}</span>}</span>
            </li>
          ))}
        </ol>
      </section>
    </div>
  );
}
