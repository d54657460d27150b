/** The audit log: filters in the address, a summary by action, every entry with before and after, CSV, and the walk of the chain. */
import { lazy, Suspense, useState } from 'react';
import { keepPreviousData } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { pathTo, type QueryOf } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Select } from '../../components/Select.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TextField } from '../../components/TextField.tsx';
import { useTrailingText } from '../../components/trailing-text.ts';
import { AuditEntryRow } from './AuditEntryRow.tsx';

const AuditSummary = lazy(() => import('./AuditSummary.tsx'));

type Query = QueryOf<typeof routes.listAudit>;
const objectTypes = ['archive', 'delivery', 'run', 'finding', 'dataset', 'draft', 'release', 'campaign', 'member', 'account', 'invitation', 'token', 'job'];

export function AuditPage() {
  const [search, setSearch] = useSearchParams();
  const ability = useAbility();
  const query = Object.fromEntries([...search].filter(([key]) => ['campaign', 'objectType', 'objectId', 'action', 'actor', 'from', 'to', 'q'].includes(key))) as Query;
  const before = search.get('before');
  const log = useRoute(routes.listAudit, {}, { ...query, before: before ? Number(before) : undefined, limit: 200 }, { placeholderData: keepPreviousData });
  const campaigns = useRoute(routes.listCampaigns);
  const set = (key: string, value: string) => setSearch((now) => { now.delete('before'); if (value) now.set(key, value); else now.delete(key); return now; }, { replace: true });
  const text = useTrailingText(search.get('q') ?? '', (typed) => set('q', typed));
  const entries = log.data?.entries ?? [];
  const last = entries[entries.length - 1];
  return (
    <>
      <PageHeader title="Audit log" lead="Who changed what, when and why. The database refuses to change or remove an entry, and each one is hashed together with the one before." actions={<a className="text-brass-deep underline" href={pathTo(routes.exportAudit, {}, query)} download="audit-log.csv">Export as CSV</a>} />
      {ability.can('verify', 'AuditEntry') && <Verification />}
      <div className="mb-4 grid gap-3 sm:grid-cols-2 lg:grid-cols-5">
        <TextField label="Search" type="search" {...text} />
        <Select label="Campaign" value={search.get('campaign') ?? ''} onChange={(value) => set('campaign', value)} options={[{ id: '', label: 'all' }, { id: 'organisation', label: 'the organisation' }, ...(campaigns.data?.campaigns ?? []).map((each) => ({ id: each.slug, label: each.title }))]} />
        <Select label="Object" value={search.get('objectType') ?? ''} onChange={(value) => set('objectType', value)} options={[{ id: '', label: 'all' }, ...objectTypes.map((type) => ({ id: type, label: type }))]} />
        <TextField label="From" type="datetime-local" value={localOf(search.get('from'))} onChange={(text) => set('from', text ? new Date(text).toISOString() : '')} />
        <TextField label="To" type="datetime-local" value={localOf(search.get('to'))} onChange={(text) => set('to', text ? new Date(text).toISOString() : '')} />
      </div>
      <ErrorPanel error={log.error} />
      {log.isPending && <Skeleton lines={10} label="Loading the audit log" />}
      {log.data && (
        <>
          <p role="status" className="mb-2 text-sm text-ink-soft">{log.data.total} {log.data.total === 1 ? 'entry' : 'entries'}{log.data.total > entries.length && `, ${entries.length} shown`}</p>
          {entries.length === 0 ? <EmptyState title="No entry matches." /> : (
            <>
              <Suspense fallback={null}><AuditSummary entries={entries} onAction={(action) => set('action', action)} chosen={search.get('action')} /></Suspense>
              <ol className="divide-y divide-rule border-y border-rule-strong">{entries.map((entry) => <AuditEntryRow key={entry.seq} entry={entry} />)}</ol>
            </>
          )}
          <div className="mt-3 flex gap-2">
            {before && <Button kind="plain" onPress={() => set('before', '')}>Newest</Button>}
            {last && last.seq > 1 && entries.length === 200 && <Button kind="plain" onPress={() => setSearch((now) => { now.set('before', String(last.seq)); return now; })}>Older entries</Button>}
          </div>
        </>
      )}
    </>
  );
}

/** What an <input type="datetime-local"> shows of a moment. */
function localOf(iso: string | null): string {
  if (!iso) return '';
  const at = new Date(iso);
  if (Number.isNaN(at.getTime())) return '';
  return new Date(at.getTime() - at.getTimezoneOffset() * 60_000).toISOString().slice(0, 16);
}

function Verification() {
  const [asked, setAsked] = useState(false);
  const verdict = useRoute(routes.verifyAudit, {}, undefined, { enabled: asked, staleTime: 0 });
  return (
    <div className="mb-4">
      <Button kind="plain" isPending={verdict.isFetching} onPress={() => { setAsked(true); if (asked) void verdict.refetch(); }}>Walk the chain</Button>
      <ErrorPanel error={verdict.error} />
      {verdict.data && <Notice kind={verdict.data.intact ? 'sound' : 'blocker'} title={verdict.data.message}><code className="font-mono text-xs break-all">{verdict.data.head}</code></Notice>}
    </div>
  );
}
