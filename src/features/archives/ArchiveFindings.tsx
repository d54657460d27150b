/** The findings of an archive, with the beam above them, and waivers. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { FindingList } from '../../evidence/FindingList.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { RecordBeam } from '../../evidence/RecordBeam.tsx';
import type { ShownFinding } from '../../evidence/finding-filter.ts';
import type { ArchiveOutlet } from './ArchivePage.tsx';

export function ArchiveFindings() {
  const { archive } = useOutletContext<ArchiveOutlet>();
  const ability = useAbility();
  const params = { archive: archive.id };
  const findings = useRoute(routes.listArchiveFindings, params);
  const beam = useRoute(routes.getArchiveBeam, params, {}, { enabled: archive.state === 'checked' });
  const touched = [routes.listArchiveFindings, routes.getArchive];
  const waive = useRouteMutation(routes.waiveFinding, touched);
  const revoke = useRouteMutation(routes.revokeWaiver, touched);
  const [waiving, setWaiving] = useState<ShownFinding | null>(null);
  const [selected, setSelected] = useState<number | null>(null);
  const mayWaive = ability.can('waive', about('Finding', { campaignId: archive.campaignId }));
  if (findings.error) return <ErrorPanel error={findings.error} />;
  return (
    <div className="space-y-6">
      {beam.data && <RecordBeam beam={beam.data} label={`Record of ${archive.name}`} selected={selected} onSelect={setSelected} />}
      <ErrorPanel error={revoke.error} />
      {findings.data ? (
        <FindingList
          findings={findings.data.findings}
          onPlace={(finding) => setSelected(finding.evidence.indices?.[0] ?? null)}
          onWaive={mayWaive ? setWaiving : undefined}
          onRevoke={mayWaive ? (finding) => revoke.mutate({ params: { finding: finding.findingId } }) : undefined}
        />
      ) : (
        <Skeleton lines={6} label="Loading the findings" />
      )}
      {waiving && (
        <ReasonDialog
          title={`Waive ${waiving.id}`} explanation={waiving.message} action="Waive this caution" pending={waive.isPending} error={waive.error}
          onClose={() => setWaiving(null)}
          onSubmit={(reason) => waive.mutate({ params: { finding: waiving.findingId }, body: { reason } }, { onSuccess: () => setWaiving(null) })}
        />
      )}
    </div>
  );
}
