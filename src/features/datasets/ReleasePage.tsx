/** One release: what it is, its caution, how to pull it, and what it was made of. Prints as a datasheet. */
import { useState } from 'react';
import { keepPreviousData } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { pullSnippet } from '#contract/pull-snippet.ts';
import type { Release } from '#contract/release.ts';
import { pathTo } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { Button } from '../../components/Button.tsx';
import { CodeBlock } from '../../components/CodeBlock.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Hash } from '../../components/Hash.tsx';
import { KeyValue } from '../../components/KeyValue.tsx';
import { Link } from '../../components/Link.tsx';
import { bytesText } from '../../components/number-format.ts';
import { Notice } from '../../components/Notice.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { MatrixView, type ValuesChoice } from '../../evidence/MatrixView.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { releaseStateMark } from '../../evidence/state-marks.ts';

interface Address {
  campaign: string;
  dataset: string;
  version: number;
}

export function ReleasePage() {
  const { campaign = '', dataset = '', version = '' } = useParams();
  const address: Address = { campaign, dataset, version: Number(version) };
  const release = useRoute(routes.getRelease, address);
  const ability = useAbility();
  const [withdrawing, setWithdrawing] = useState(false);
  const withdraw = useRouteMutation(routes.withdrawRelease, [routes.getRelease, routes.getDataset]);
  if (release.error) return <ErrorPanel error={release.error} />;
  if (!release.data) return <Skeleton lines={10} label="Loading the release" />;
  const data = release.data;
  const facts = { campaignId: data.campaignId };
  const mayPull = ability.can('pull', about('Release', facts)) && data.state !== 'withdrawn';
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: data.campaignTitle, to: `/campaigns/${campaign}` }, { label: data.title, to: `/campaigns/${campaign}/datasets/${dataset}` }, { label: `Release ${data.version}` }]} />
      <PageHeader
        kicker="Release" title={`${data.title}, release ${data.version}`} lead={data.description} status={releaseStateMark[data.state]}
        actions={data.state !== 'withdrawn' && ability.can('withdraw', about('Release', facts)) ? <Button kind="quiet" onPress={() => setWithdrawing(true)}>Withdraw</Button> : undefined}
      />
      {data.state === 'withdrawn' && <Notice kind="blocker" title="This release was withdrawn.">{data.withdrawnReason} Withdrawn by {data.withdrawnBy?.name}{data.withdrawnAt && <>, <TimeStamp at={data.withdrawnAt} /></>}. Ask {data.contact}.</Notice>}
      {data.state === 'superseded' && <Notice kind="note" title="A newer release exists.">This one stays as it is, and can be pulled.</Notice>}
      <Notice kind="caution" title="Training data, not a validated model.">{data.caution}</Notice>
      {mayPull && <PullSection address={address} />}
      <section aria-labelledby="facts-title" className="mt-8 space-y-3">
        <h2 id="facts-title" className="text-xl">Facts</h2>
        <KeyValue
          items={[
            { label: 'Built by', value: data.builtBy.name }, { label: 'Approved by', value: data.approvedBy.name },
            { label: 'Released', value: <TimeStamp at={data.releasedAt} /> }, { label: 'Made from', value: <Link to={`/drafts/${data.draft}`}>the draft</Link> },
            { label: 'Licence', value: data.licence }, { label: 'Handling', value: data.handlingLabel }, { label: 'Questions', value: data.contact }, { label: 'Pulled', value: `${data.pulls} times` },
            { label: 'Manifest', value: <Hash value={data.manifestSha256} label="SHA-256 of the manifest" /> }, { label: 'Size of the bag', value: bytesText(data.bytes) },
          ]}
        />
        <p className="text-sm"><span className="text-ink-soft">Cite as: </span>{data.citation}</p>
        {data.note && <p className="text-sm"><span className="text-ink-soft">Note of the steward: </span>{data.note}</p>}
      </section>
      <section aria-labelledby="made-title" className="mt-8 space-y-3">
        <h2 id="made-title" className="text-xl">How it was made</h2>
        <ol className="list-decimal space-y-1 pl-6">{data.build.steps.map((step) => <li key={step.step}><span className="font-medium">{step.step}</span>: {step.sentence}</li>)}</ol>
        {data.waivers.length > 0 && (
          <>
            <h3 className="text-lg">Waived cautions</h3>
            <ul className="space-y-2">{data.waivers.map((waiver) => <li key={waiver.check + waiver.at} className="border-l-2 border-brass pl-3 text-sm"><code className="font-mono">{waiver.check}</code> {waiver.message} Waived by {waiver.by.name}: {waiver.reason}</li>)}</ul>
          </>
        )}
      </section>
      <section aria-labelledby="matrix-title" className="mt-10 space-y-4">
        <h2 id="matrix-title" className="text-xl">Matrix</h2>
        <ReleaseMatrix address={address} release={data} />
      </section>
      <Files address={address} release={data} mayPull={mayPull} />
      {ability.can('read', about('Pull', facts)) && <Pulls address={address} />}
      {withdrawing && (
        <ReasonDialog
          title={`Withdraw release ${data.version}`} explanation="Nobody can pull it any more; this page stays and says why. A withdrawal is final." action="Withdraw the release" danger
          pending={withdraw.isPending} error={withdraw.error} onClose={() => setWithdrawing(false)}
          onSubmit={(reason) => withdraw.mutate({ params: address, body: { reason } }, { onSuccess: () => setWithdrawing(false) })}
        />
      )}
    </>
  );
}

function PullSection({ address }: { address: Address }) {
  return (
    <section aria-labelledby="pull-title" className="mt-6 space-y-3">
      <h2 id="pull-title" className="text-xl">Pull</h2>
      <p className="max-w-prose text-ink-soft">Make a <Link to="/tokens">personal token</Link> with the scope "pull" and put it into the environment as PENNYWEIGHT_TOKEN. These lines need NumPy and the standard library only.</p>
      <CodeBlock label="Python" text={pullSnippet(window.location.origin, address)} />
      <p className="flex flex-wrap gap-x-6 gap-y-1 text-sm">
        <a className="text-brass-deep underline" href={pathTo(routes.getReleaseFile, { ...address, path: 'data/release.h5' })} download>release.h5</a>
        <a className="text-brass-deep underline" href={pathTo(routes.getReleaseMatrix, address, { split: 'train', weighted: true })} download>training columns, weighted, as NPY</a>
      </p>
    </section>
  );
}

function ReleaseMatrix({ address, release }: { address: Address; release: Release }) {
  const [choice, setChoice] = useState<ValuesChoice>({ of: 'mode', index: 0, field: release.build.fields[0]!.name });
  const beam = useRoute(routes.getReleaseBeam, address);
  const values = useRoute(routes.getReleaseValues, address, { ...choice }, { placeholderData: keepPreviousData });
  return <MatrixView build={release.build} beam={beam.data} values={{ data: values.data, error: values.error, isFetching: values.isFetching }} choice={choice} onChoice={setChoice} fileName={`${address.dataset}-${address.version}`} />;
}

function Files({ address, release, mayPull }: { address: Address; release: Release; mayPull: boolean }) {
  return (
    <section aria-labelledby="files-title" className="mt-10 space-y-3">
      <h2 id="files-title" className="text-xl">Files of the bag</h2>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Files of the bag">
        <table className="w-full min-w-[36rem] text-sm">
          <thead className="border-b border-rule-strong text-left"><tr><th className="py-2 font-medium">File</th><th className="text-right font-medium">Size</th><th className="pl-8 font-medium">SHA-256</th></tr></thead>
          <tbody className="divide-y divide-rule">
            {release.files.map((file) => (
              <tr key={file.path}>
                <td className="py-1.5 font-mono">{mayPull ? <a className="text-brass-deep underline" href={pathTo(routes.getReleaseFile, { ...address, path: file.path })} download>{file.path}</a> : file.path}</td>
                <td className="text-right tabular-nums">{bytesText(file.bytes)}</td>
                <td className="pl-8"><Hash value={file.sha256} label={`SHA-256 of ${file.path}`} /></td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}

function Pulls({ address }: { address: Address }) {
  const pulls = useRoute(routes.listPulls, address);
  if (!pulls.data || pulls.data.pulls.length === 0) return <ErrorPanel error={pulls.error} />;
  return (
    <section aria-labelledby="pulls-title" className="mt-10 space-y-3">
      <h2 id="pulls-title" className="text-xl">Who pulled it</h2>
      <ul className="divide-y divide-rule border-y border-rule text-sm">
        {pulls.data.pulls.slice(0, 50).map((each, i) => <li key={i} className="flex flex-wrap justify-between gap-x-6 py-1.5"><span>{each.by.name}: {each.what}</span><span className="text-ink-soft tabular-nums">{bytesText(each.bytes)}, <TimeStamp at={each.at} /></span></li>)}
      </ul>
    </section>
  );
}
