/** What waits for me. */
import { routes } from '#contract/routes.ts';
import { useMe } from '../../access/ability.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link, LinkButton } from '../../components/Link.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { ProgressBar } from '../../components/ProgressBar.tsx';
import { SeverityCounts } from '../../components/SeverityCounts.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { draftStateMark } from '../../evidence/state-marks.ts';
import type { DraftSummary } from '#contract/dataset.ts';

export function DeskPage() {
  const me = useMe();
  const desk = useRoute(routes.getDesk, {}, undefined, { refetchInterval: 10_000 });
  const data = desk.data;
  const nothing = data && data.reviews.length + data.returned.length + data.drafts.length + data.archives.length + data.deliveries.length + data.jobs.length === 0;
  return (
    <>
      <PageHeader title={`Desk of ${me?.user.name ?? ''}`} lead="What waits for you, and what happened last." />
      <ErrorPanel error={desk.error} />
      {desk.isPending && <Skeleton lines={8} label="Loading your desk" />}
      {nothing && <EmptyState title="Nothing waits for you."><LinkButton kind="plain" to="/campaigns">Look at the campaigns</LinkButton></EmptyState>}
      {data && (
        <div className="grid gap-x-12 gap-y-10 lg:grid-cols-2">
          <DraftSection title="To review" drafts={data.reviews} />
          <DraftSection title="Returned to you" drafts={data.returned} />
          <DraftSection title="Your drafts" drafts={data.drafts} />
          {data.archives.length > 0 && (
            <Section title="Archives with open findings">
              {data.archives.map((archive) => (
                <li key={archive.id} className="flex flex-wrap items-baseline justify-between gap-x-4 py-2">
                  <span><Link to={`/archives/${archive.id}`}>{archive.name}</Link> <span className="text-sm text-ink-soft">run {archive.run}, {archive.campaign}</span></span>
                  {archive.state === 'checking' ? <StatusMark kind="working" label="being checked" /> : archive.state === 'unreadable' ? <StatusMark kind="blocker" label="unreadable" /> : <SeverityCounts counts={archive.findings} />}
                </li>
              ))}
            </Section>
          )}
          {data.deliveries.length > 0 && (
            <Section title="Deliveries on their way">
              {data.deliveries.map((delivery) => (
                <li key={delivery.id} className="flex flex-wrap items-baseline justify-between gap-x-4 py-2">
                  <Link to={`/campaigns/${delivery.campaign}/hand-in`}>Run {delivery.run}</Link>
                  <StatusMark kind={delivery.state === 'refused' ? 'blocker' : 'waiting'} label={delivery.state === 'refused' ? (delivery.problem ?? 'refused') : `${delivery.files.filter((file) => file.state === 'verified').length} of ${delivery.files.length} files received`} />
                </li>
              ))}
            </Section>
          )}
          {data.jobs.length > 0 && <Section title="Jobs">{data.jobs.map((job) => <li key={job.id} className="py-2"><ProgressBar label={job.label} done={job.done} total={job.total} unit={job.unit} rate={job.rate} secondsLeft={job.secondsLeft} /></li>)}</Section>}
          {data.recent.length > 0 && (
            <Section title="What happened last">
              {data.recent.map((entry) => (
                <li key={entry.seq} className="grid grid-cols-[1fr_auto] gap-x-4 py-1.5 text-sm">
                  <span className="min-w-0">{entry.actor?.name ?? 'somebody'}: <code className="font-mono">{entry.action}</code> {entry.label}</span>
                  <span className="text-ink-soft"><TimeStamp at={entry.at} /></span>
                </li>
              ))}
            </Section>
          )}
        </div>
      )}
    </>
  );
}

function Section({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <section className="min-w-0">
      <h2 className="mb-1 text-lg">{title}</h2>
      <ul className="divide-y divide-rule border-y border-rule">{children}</ul>
    </section>
  );
}

function DraftSection({ title, drafts }: { title: string; drafts: DraftSummary[] }) {
  if (drafts.length === 0) return null;
  return (
    <Section title={title}>
      {drafts.map((draft) => (
        <li key={draft.id} className="flex flex-wrap items-baseline justify-between gap-x-4 py-2">
          <Link to={`/drafts/${draft.id}`}>{draft.datasetTitle}, draft {draft.number}</Link>
          <span className="flex items-baseline gap-x-4 text-sm text-ink-soft"><StatusMark {...draftStateMark[draft.state]} /><TimeStamp at={draft.updatedAt} /></span>
        </li>
      ))}
    </Section>
  );
}
