/** What each array means and why; corrected in one place, with what that does to shapes and stamps before it is saved. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import type { Reading } from '#contract/reading.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { Checkbox } from '../../components/Checkbox.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { ArrayRoles } from './ArrayRoles.tsx';
import { ReadingFields } from './ReadingFields.tsx';
import { ReadingTime } from './ReadingTime.tsx';
import { ReadingTrial } from './ReadingTrial.tsx';
import type { ArchiveOutlet } from './ArchivePage.tsx';

const sources = {
  proposed: 'Proposed by the program from names, shapes and attributes.',
  saved: 'Taken from the reading that the campaign saved for this solver.',
  corrected: 'Corrected by a person.',
};

export function ArchiveReading() {
  const { archive } = useOutletContext<ArchiveOutlet>();
  const ability = useAbility();
  const params = { archive: archive.id };
  const current = useRoute(routes.getArchiveReading, params, undefined, { enabled: archive.state === 'checked' || archive.readingSource !== null });
  const put = useRouteMutation(routes.putArchiveReading, [routes.getArchive, routes.getArchiveReading, routes.listArchiveFindings, routes.getArchiveBeam, routes.getArchiveWeights]);
  const [edited, setEdited] = useState<Reading | null>(null);
  const [saveForSolver, setSaveForSolver] = useState(archive.solver !== '');
  const [asking, setAsking] = useState(false);
  if (current.error) return <ErrorPanel error={current.error} />;
  if (!current.data) return archive.readingSource === null ? <EmptyState title="No reading yet.">It is proposed while the archive is being read.</EmptyState> : <Skeleton lines={8} label="Loading the reading" />;
  const { contents, misfits, source, proposal } = current.data;
  const reading = edited ?? current.data.reading;
  const mayCorrect = ability.can('correct', about('Archive', { campaignId: archive.campaignId, createdBy: archive.createdBy.id })) && archive.state !== 'withdrawn';
  return (
    <div className="space-y-8">
      <p className="text-ink-soft">{sources[source]} Layout: {reading.layout.replaceAll('-', ' ')}.</p>
      {misfits.length > 0 && (
        <Notice kind="caution" title="The saved reading does not fit this archive.">
          <ul className="list-disc pl-5">{misfits.map((misfit) => <li key={misfit.path + misfit.message}>{misfit.message}</li>)}</ul>
        </Notice>
      )}
      <ReadingTime reading={reading} contents={contents} onChange={mayCorrect ? setEdited : undefined} />
      <ReadingFields reading={reading} contents={contents} onChange={mayCorrect ? setEdited : undefined} />
      {edited && <ReadingTrial archive={archive.id} reading={edited} />}
      {mayCorrect && edited && (
        <div className="sticky bottom-0 flex flex-wrap items-center gap-3 border-t border-rule bg-paper py-3">
          <Button kind="primary" onPress={() => setAsking(true)}>Save the corrected reading</Button>
          <Button kind="quiet" onPress={() => setEdited(null)}>Undo all changes</Button>
          {source !== 'proposed' && <Button kind="quiet" onPress={() => setEdited(proposal)}>Go back to the proposal</Button>}
          {archive.solver && <Checkbox isSelected={saveForSolver} onChange={setSaveForSolver}>Use it for the next archive of {archive.solver}</Checkbox>}
        </div>
      )}
      <ArrayRoles reading={reading} contents={contents} />
      {asking && edited && (
        <ReasonDialog
          title="Save the corrected reading" explanation="The archive is read and checked again with it; findings and waivers that no longer apply go." action="Save and check again"
          pending={put.isPending} error={put.error} onClose={() => setAsking(false)}
          onSubmit={(reason) => put.mutate({ params, body: { reading: edited, reason, saveForSolver: saveForSolver && archive.solver !== '' } }, { onSuccess: () => { setAsking(false); setEdited(null); } })}
        />
      )}
    </div>
  );
}
