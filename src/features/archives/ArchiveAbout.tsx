/** Files with their SHA-256, the run's parameters (which can be given or corrected), and where the archive is used. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { pathTo } from '#contract/route.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { bytesText } from '../../components/number-format.ts';
import { Hash } from '../../components/Hash.tsx';
import { KeyValue } from '../../components/KeyValue.tsx';
import { Link } from '../../components/Link.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { Quantity } from '../../components/Quantity.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { withValue } from '../../evidence/with-value.ts';
import type { ArchiveOutlet } from './ArchivePage.tsx';

export function ArchiveAbout() {
  const { archive } = useOutletContext<ArchiveOutlet>();
  const ability = useAbility();
  const facts = { campaignId: archive.campaignId, createdBy: archive.createdBy.id };
  const mayPull = ability.can('pull', about('Archive', facts));
  return (
    <div className="space-y-8">
      <section aria-labelledby="files-title" className="space-y-3">
        <h2 id="files-title" className="text-xl">Files as received</h2>
        <ul className="divide-y divide-rule border-y border-rule">
          {archive.files.map((file, position) => (
            <li key={file.name} className="flex flex-wrap items-baseline gap-x-6 gap-y-1 py-3">
              <span className="font-mono">{file.name}</span>
              <span className="tabular-nums">{bytesText(file.bytes)}</span>
              <Hash value={file.sha256} label={`SHA-256 of ${file.name}`} />
              {mayPull && <a className="text-brass-deep underline" href={pathTo(routes.getArchiveFile, { archive: archive.id, position })} download={file.name}>Download</a>}
            </li>
          ))}
        </ul>
      </section>
      <RunParameters archive={archive} mayCorrect={ability.can('correct', about('Archive', facts))} />
      <section aria-labelledby="record-title" className="space-y-3">
        <h2 id="record-title" className="text-xl">Record</h2>
        <KeyValue
          items={[
            { label: 'Format', value: archive.format ?? 'unknown' },
            { label: 'Layout', value: archive.layout ?? 'unknown' },
            { label: 'Snapshots', value: archive.snapshots ?? '-' },
            { label: 'Nodes', value: archive.nodes ?? '-' },
            { label: 'Fields', value: archive.fields.join(', ') || '-' },
            { label: 'Handed in', value: <><TimeStamp at={archive.createdAt} /> by {archive.createdBy.name}</> },
            { label: 'Note', value: archive.note || '-' },
          ]}
        />
      </section>
      <section aria-labelledby="use-title" className="space-y-3">
        <h2 id="use-title" className="text-xl">Used in</h2>
        {archive.usedIn.length === 0 ? <p className="text-ink-soft">No draft uses this archive yet.</p> : (
          <ul className="space-y-1">
            {archive.usedIn.map((use) => (
              <li key={use.draft}><Link to={`/drafts/${use.draft}`}>{use.dataset}, draft {use.number}</Link> ({use.state})</li>
            ))}
          </ul>
        )}
      </section>
    </div>
  );
}

function RunParameters({ archive, mayCorrect }: { archive: ArchiveOutlet['archive']; mayCorrect: boolean }) {
  const campaign = useRoute(routes.getCampaign, { campaign: archive.campaign });
  const put = useRouteMutation(routes.putRunParameters, [routes.getArchive, routes.listArchiveFindings]);
  const [edited, setEdited] = useState<Record<string, number> | null>(null);
  const [asking, setAsking] = useState(false);
  const known = campaign.data?.parameters ?? [];
  const names = [...new Set([...known.map((parameter) => parameter.name), ...Object.keys(archive.parameters)])];
  const unitOf = (name: string) => known.find((parameter) => parameter.name === name)?.unit ?? null;
  return (
    <section aria-labelledby="parameters-title" className="space-y-3">
      <h2 id="parameters-title" className="text-xl">Parameters of run {archive.run}</h2>
      {edited === null ? (
        <KeyValue items={names.map((name) => ({ label: name, value: name in archive.parameters ? <Quantity value={archive.parameters[name]!} unit={unitOf(name)} /> : 'not given' }))} />
      ) : (
        <div className="grid max-w-xl gap-3 sm:grid-cols-2">
          {names.map((name) => (
            <NumberField key={name} label={name} unit={unitOf(name)} value={edited[name] ?? null}
              onChange={(value) => setEdited((now) => withValue(now ?? {}, name, value))} />
          ))}
        </div>
      )}
      {mayCorrect && names.length > 0 && (
        <div className="flex gap-2">
          {edited === null ? <Button kind="plain" onPress={() => setEdited(archive.parameters)}>Correct</Button> : (
            <>
              <Button kind="primary" onPress={() => setAsking(true)}>Save</Button>
              <Button kind="quiet" onPress={() => setEdited(null)}>Cancel</Button>
            </>
          )}
        </div>
      )}
      {asking && edited && (
        <ReasonDialog
          title="Correct the run's parameters" explanation="The archive is checked again with the new values." action="Save the parameters" pending={put.isPending} error={put.error}
          onClose={() => setAsking(false)}
          onSubmit={(reason) => put.mutate({ params: { archive: archive.id }, body: { parameters: edited, reason } }, { onSuccess: () => { setAsking(false); setEdited(null); } })}
        />
      )}
    </section>
  );
}
