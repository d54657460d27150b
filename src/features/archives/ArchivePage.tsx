/** One archive: what it is, whether it is sound, what to do next; its parts are tabs. */
import { useState } from 'react';
import { Outlet, useParams } from 'react-router-dom';
import { about } from '#contract/access.ts';
import type { Archive } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { useAbility } from '../../access/ability.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TabLinks } from '../../components/TabLinks.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { JobProgress } from '../../evidence/JobProgress.tsx';
import { verdict } from '../../evidence/finding-filter.ts';

export interface ArchiveOutlet {
  archive: Archive;
}

export function ArchivePage() {
  const { archive: id = '' } = useParams();
  const archive = useRoute(routes.getArchive, { archive: id }, undefined, { refetchInterval: (query) => (query.state.data?.state === 'checking' ? 2000 : false) });
  const findings = useRoute(routes.listArchiveFindings, { archive: id });
  if (archive.error) return <ErrorPanel error={archive.error} />;
  if (!archive.data) return <Skeleton lines={8} label="Loading the archive" />;
  const data = archive.data;
  const state = findings.data ? verdict(findings.data.findings) : null;
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: data.campaign, to: `/campaigns/${data.campaign}` }, { label: 'Archives', to: `/campaigns/${data.campaign}/archives` }, { label: data.name }]} />
      <PageHeader
        kicker="Archive"
        title={data.name}
        lead={`Run ${data.run}${data.solver ? `, solver ${data.solver}` : ''}. Handed in by ${data.createdBy.name}.`}
        status={data.state === 'checked' && state ? { kind: state.kind, label: state.sentence } : undefined}
        actions={<ArchiveActions archive={data} />}
      />
      {data.state === 'checking' && data.jobId && <JobProgress jobId={data.jobId} onDone={() => { void archive.refetch(); void findings.refetch(); }} />}
      {data.state === 'unreadable' && <Notice kind="blocker" title="This archive cannot be read.">The finding below says why. The bytes are kept as they were received; hand the repaired file in as a new archive.</Notice>}
      {data.state === 'withdrawn' && <Notice kind="caution" title="Withdrawn from further use.">{data.withdrawnReason}</Notice>}
      <TabLinks
        label="Parts of the archive"
        items={[
          { to: `/archives/${id}`, label: 'Findings', end: true },
          { to: `/archives/${id}/record`, label: 'Record and weights' },
          { to: `/archives/${id}/snapshots`, label: 'Snapshots' },
          { to: `/archives/${id}/reading`, label: 'Reading' },
          { to: `/archives/${id}/about`, label: 'Files and run' },
        ]}
      />
      <Outlet context={{ archive: data } satisfies ArchiveOutlet} />
    </>
  );
}

function ArchiveActions({ archive }: { archive: Archive }) {
  const ability = useAbility();
  const [withdrawing, setWithdrawing] = useState(false);
  const touched = [routes.getArchive, routes.listArchiveFindings, routes.listArchives];
  const recheck = useRouteMutation(routes.recheckArchive, touched);
  const withdraw = useRouteMutation(routes.withdrawArchive, touched);
  const facts = { campaignId: archive.campaignId, createdBy: archive.createdBy.id };
  const params = { archive: archive.id };
  if (archive.state === 'withdrawn') return null;
  return (
    <>
      {ability.can('check', about('Archive', facts)) && archive.state !== 'checking' && (
        <Button kind="plain" isPending={recheck.isPending} onPress={() => recheck.mutate({ params })}>Check again</Button>
      )}
      {ability.can('withdraw', about('Archive', facts)) && <Button kind="quiet" onPress={() => setWithdrawing(true)}>Withdraw</Button>}
      {withdrawing && (
        <ReasonDialog
          title={`Withdraw ${archive.name}`}
          explanation="The archive stays in storage and in the audit log, but no new draft can use it. Releases that contain it say so."
          action="Withdraw the archive" danger pending={withdraw.isPending} error={withdraw.error}
          onClose={() => setWithdrawing(false)}
          onSubmit={(reason) => withdraw.mutate({ params, body: { reason } }, { onSuccess: () => setWithdrawing(false) })}
        />
      )}
    </>
  );
}
