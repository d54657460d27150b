/** The steward's approval: licence, handling, contact; says what it will do and what the release is not. */
import { useState } from 'react';
import { approval, type Draft } from '#contract/dataset.ts';
import type { Route } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { useMe } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { Dialog } from '../../components/Dialog.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { TextField } from '../../components/TextField.tsx';

export function ApprovalDialog({ draft, open, touched, onClose }: { draft: Draft; open: boolean; touched: Route[]; onClose: () => void }) {
  const me = useMe();
  const campaign = useRoute(routes.getCampaign, { campaign: draft.campaign });
  const approve = useRouteMutation(routes.approveDraft, touched);
  const [given, setGiven] = useState<{ note?: string; licence?: string; handlingLabel?: string; contact?: string }>({});
  const [tried, setTried] = useState(false);
  const values = {
    note: given.note ?? '', licence: given.licence ?? campaign.data?.licence ?? '', handlingLabel: given.handlingLabel ?? campaign.data?.handlingLabel ?? '',
    contact: given.contact ?? (campaign.data?.contact || me?.user.name || ''),
  };
  const checked = approval.safeParse(values);
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  return (
    <Dialog title={`Approve ${draft.datasetTitle}, draft ${draft.number}`} isOpen onClose={onClose}>
      <form
        className="space-y-4" noValidate
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (checked.success) approve.mutate({ params: { draft: draft.id }, body: checked.data }, { onSuccess: onClose });
        }}
      >
        <p>This makes a release that never changes: its bytes, weights, recipe and findings are sealed with checksums under your name.</p>
        {open && <Notice kind="caution" title="Findings are still open.">The server refuses the approval while a blocker is open or a caution has neither a remedy in the recipe nor a waiver.</Notice>}
        <div className="grid gap-4 sm:grid-cols-2">
          <TextField label="Licence (SPDX id or own text)" value={values.licence} onChange={(licence) => setGiven({ ...given, licence })} error={complaint('licence')} />
          <TextField label="Handling label" value={values.handlingLabel} onChange={(handlingLabel) => setGiven({ ...given, handlingLabel })} error={complaint('handlingLabel')} />
        </div>
        <TextField label="Who answers questions" value={values.contact} onChange={(contact) => setGiven({ ...given, contact })} error={complaint('contact')} />
        <TextField label="Note, printed in the datasheet" multiline rows={3} value={values.note} onChange={(note) => setGiven({ ...given, note })} />
        <p className="text-sm text-ink-soft">A release is training data, not a validated model. Export control, licence and confidentiality are for your organisation's rules to decide.</p>
        <ErrorPanel error={approve.error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind="primary" type="submit" isPending={approve.isPending} isDisabled={campaign.isPending}>Approve and release</Button>
        </div>
      </form>
    </Dialog>
  );
}
