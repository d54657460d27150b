/** What can be done with a draft now: build, submit, return, approve; each only for those who may. */
import { useState } from 'react';
import { about } from '#contract/access.ts';
import type { Draft } from '#contract/dataset.ts';
import { routes } from '#contract/routes.ts';
import { useAbility, useMe } from '../../access/ability.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ConfirmDialog } from '../../components/ConfirmDialog.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { TextField } from '../../components/TextField.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import { ApprovalDialog } from './ApprovalDialog.tsx';

const touched = [routes.getDraft, routes.listDraftFindings, routes.getDataset, routes.listReviews, routes.getDesk];

export function DraftActions({ draft, open }: { draft: Draft; open: boolean }) {
  const ability = useAbility();
  const me = useMe();
  const [asking, setAsking] = useState<'submit' | 'return' | 'approve' | null>(null);
  const [note, setNote] = useState('');
  const build = useRouteMutation(routes.buildDraft, touched);
  const submit = useRouteMutation(routes.submitDraft, touched);
  const giveBack = useRouteMutation(routes.returnDraft, touched);
  const params = { draft: draft.id };
  const own = { campaignId: draft.campaignId, createdBy: draft.createdBy.id };
  const editable = draft.state === 'draft' || draft.state === 'returned';
  const mayReview = ability.can('review', about('Draft', { ...own, makers: draft.makers.map((person) => person.id) }));
  const isMaker = draft.makers.some((person) => person.id === me?.user.id);
  const isSteward = ability.can('review', 'Draft');
  return (
    <div className="space-y-2">
      <div className="flex flex-wrap gap-2">
        {editable && ability.can('build', about('Draft', own)) && (
          <Button kind={draft.build && !draft.stale ? 'plain' : 'primary'} isPending={build.isPending} onPress={() => build.mutate({ params })}>{draft.build ? 'Build again' : 'Build the matrix'}</Button>
        )}
        {editable && ability.can('submit', about('Draft', own)) && draft.build && !draft.stale && <Button kind="primary" onPress={() => setAsking('submit')}>Submit for review</Button>}
        {draft.state === 'submitted' && mayReview && (
          <>
            <Button kind="primary" onPress={() => setAsking('approve')}>Approve</Button>
            <Button kind="plain" onPress={() => setAsking('return')}>Return with reasons</Button>
          </>
        )}
      </div>
      {draft.state === 'submitted' && isSteward && isMaker && <p className="text-sm text-ink-soft">You made part of this draft, so another steward decides.</p>}
      <ErrorPanel error={build.error} />
      {asking === 'submit' && (
        <ConfirmDialog title="Submit for review" action="Submit" pending={submit.isPending} error={submit.error} onClose={() => setAsking(null)} onConfirm={() => submit.mutate({ params, body: { note } }, { onSuccess: () => setAsking(null) })}>
          <p className="mb-4">A steward decides on it. Until it is returned, the recipe cannot be changed.</p>
          <TextField label="Note to the steward" multiline rows={3} value={note} onChange={setNote} />
        </ConfirmDialog>
      )}
      {asking === 'return' && (
        <ReasonDialog title="Return the draft" explanation="The modeler can change the recipe and submit it again." action="Return" pending={giveBack.isPending} error={giveBack.error} onClose={() => setAsking(null)} onSubmit={(reason) => giveBack.mutate({ params, body: { reason } }, { onSuccess: () => setAsking(null) })} />
      )}
      {asking === 'approve' && <ApprovalDialog draft={draft} open={open} touched={touched} onClose={() => setAsking(null)} />}
    </div>
  );
}
