/** One dataset: its releases, its drafts, and how to begin the next draft. */
import { useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { Button } from '../../components/Button.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { bytesText } from '../../components/number-format.ts';
import { PageHeader } from '../../components/PageHeader.tsx';
import { SeverityCounts } from '../../components/SeverityCounts.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { draftStateMark, releaseStateMark } from '../../evidence/state-marks.ts';
import { NewDraft } from './NewDraft.tsx';

export function DatasetPage() {
  const { campaign = '', dataset: slug = '' } = useParams();
  const navigate = useNavigate();
  const ability = useAbility();
  const dataset = useRoute(routes.getDataset, { campaign, dataset: slug });
  const create = useRouteMutation(routes.createDraft, [routes.getDataset]);
  const [choosing, setChoosing] = useState(false);
  if (dataset.error) return <ErrorPanel error={dataset.error} />;
  if (!dataset.data) return <Skeleton lines={8} label="Loading the dataset" />;
  const data = dataset.data;
  const mayDraft = ability.can('create', about('Draft', { campaignId: data.campaignId }));
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: campaign, to: `/campaigns/${campaign}` }, { label: 'Datasets', to: `/campaigns/${campaign}/datasets` }, { label: data.title }]} />
      <PageHeader kicker="Dataset" title={data.title} lead={data.description} actions={mayDraft ? <Button kind="primary" onPress={() => setChoosing(true)}>Begin a draft</Button> : undefined} />
      <section aria-labelledby="releases-title" className="space-y-3">
        <h2 id="releases-title" className="text-xl">Releases</h2>
        {data.releases.length === 0 && <EmptyState title="Not released yet.">A release is made when a steward approves a draft.</EmptyState>}
        <ul className="divide-y divide-rule border-y border-rule">
          {data.releases.map((release) => (
            <li key={release.id} className="flex flex-wrap items-baseline justify-between gap-x-8 gap-y-1 py-3">
              <span className="flex items-baseline gap-4"><Link to={`/campaigns/${campaign}/datasets/${slug}/releases/${release.version}`}>Release {release.version}</Link><StatusMark {...releaseStateMark[release.state]} /></span>
              <span className="text-sm tabular-nums text-ink-soft">{release.rows} rows, {release.columns} columns, {bytesText(release.bytes)}; built by {release.builtBy.name}, approved by {release.approvedBy.name}, <TimeStamp at={release.releasedAt} /></span>
            </li>
          ))}
        </ul>
      </section>
      <section aria-labelledby="drafts-title" className="mt-10 space-y-3">
        <h2 id="drafts-title" className="text-xl">Drafts</h2>
        {data.drafts.length === 0 && <EmptyState title="No draft yet.">{mayDraft ? 'Begin one: choose the archives, then shape the recipe.' : 'A modeler or a steward begins one.'}</EmptyState>}
        <ul className="divide-y divide-rule border-y border-rule">
          {data.drafts.map((draft) => (
            <li key={draft.id} className="flex flex-wrap items-baseline justify-between gap-x-8 gap-y-1 py-3">
              <span className="flex items-baseline gap-4"><Link to={`/drafts/${draft.id}`}>Draft {draft.number}</Link><StatusMark {...draftStateMark[draft.state]} /></span>
              <span className="flex flex-wrap items-baseline gap-x-4 text-sm text-ink-soft"><SeverityCounts counts={draft.findings} /> {draft.createdBy.name}, <TimeStamp at={draft.updatedAt} /></span>
            </li>
          ))}
        </ul>
      </section>
      {choosing && (
        <NewDraft
          campaign={campaign} latest={data.drafts[0]?.id ?? null} pending={create.isPending} error={create.error} onClose={() => setChoosing(false)}
          onCreate={(recipe) => create.mutate({ params: { campaign, dataset: slug }, body: { recipe } }, { onSuccess: (draft) => void navigate(`/drafts/${draft.id}`) })}
        />
      )}
    </>
  );
}
