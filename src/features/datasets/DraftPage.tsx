/** One draft: what it is, whether it can be released, what comes next. */
import { Outlet, useParams } from 'react-router-dom';
import type { Draft } from '#contract/dataset.ts';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { Notice } from '../../components/Notice.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TabLinks } from '../../components/TabLinks.tsx';
import { JobProgress } from '../../evidence/JobProgress.tsx';
import { verdict } from '../../evidence/finding-filter.ts';
import { draftStateMark } from '../../evidence/state-marks.ts';
import { DraftActions } from './DraftActions.tsx';

export interface DraftOutlet {
  draft: Draft;
}

export function DraftPage() {
  const { draft: id = '' } = useParams();
  const draft = useRoute(routes.getDraft, { draft: id });
  const findings = useRoute(routes.listDraftFindings, { draft: id });
  if (draft.error) return <ErrorPanel error={draft.error} />;
  if (!draft.data) return <Skeleton lines={8} label="Loading the draft" />;
  const data = draft.data;
  const state = findings.data ? verdict(findings.data.findings) : null;
  const lastReturn = data.state === 'returned' ? [...data.history].reverse().find((event) => event.reason) : undefined;
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: data.campaign, to: `/campaigns/${data.campaign}` }, { label: data.datasetTitle, to: `/campaigns/${data.campaign}/datasets/${data.dataset}` }, { label: `Draft ${data.number}` }]} />
      <PageHeader
        kicker={<>Draft <StatusMark {...draftStateMark[data.state]} /></>}
        title={`${data.datasetTitle}, draft ${data.number}`}
        lead={`Made by ${data.createdBy.name} from ${data.sources.map((source) => source.run).join(', ')}.`}
        status={state ? { kind: state.kind, label: state.sentence } : undefined}
        actions={<DraftActions draft={data} open={state?.kind !== 'sound'} />}
      />
      {data.releaseVersion !== null && <Notice kind="sound" title={`Release ${data.releaseVersion} was made from this draft.`}><Link to={`/campaigns/${data.campaign}/datasets/${data.dataset}/releases/${data.releaseVersion}`}>See the release</Link></Notice>}
      {lastReturn && <Notice kind="caution" title={`Returned by ${lastReturn.by.name}.`}>{lastReturn.reason}</Notice>}
      {data.jobId && <JobProgress jobId={data.jobId} campaignId={data.campaignId} onDone={() => { void draft.refetch(); void findings.refetch(); }} />}
      {data.stale && data.build && <Notice kind="caution" title="The recipe changed since the matrix was built.">Build again before you submit.</Notice>}
      <TabLinks
        label="Parts of the draft"
        items={[
          { to: `/drafts/${id}`, label: 'Recipe', end: true },
          { to: `/drafts/${id}/findings`, label: 'Findings' },
          { to: `/drafts/${id}/matrix`, label: 'Matrix and spectrum' },
          { to: `/drafts/${id}/sources`, label: 'Sources and history' },
        ]}
      />
      <Outlet context={{ draft: data } satisfies DraftOutlet} />
    </>
  );
}
