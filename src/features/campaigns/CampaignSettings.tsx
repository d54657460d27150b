/** Fields with units and limits, parameters with ranges, quota, handling, and thresholds of the checks. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { campaignUpdate, type Campaign } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { TextField } from '../../components/TextField.tsx';
import type { CampaignOutlet } from './CampaignPage.tsx';
import { RangeRows } from './RangeRows.tsx';
import { Thresholds } from './Thresholds.tsx';

type Edited = Pick<Campaign, 'title' | 'description' | 'quotaBytes' | 'fields' | 'parameters' | 'policy' | 'handlingLabel' | 'contact' | 'licence'>;

const gibibyte = 2 ** 30;

export function CampaignSettings() {
  const { campaign } = useOutletContext<CampaignOutlet>();
  const mayChange = useAbility().can('update', about('Campaign', { campaignId: campaign.id }));
  const update = useRouteMutation(routes.updateCampaign, [routes.getCampaign, routes.listCampaigns]);
  const [edited, setEdited] = useState<Partial<Edited>>({});
  const [reason, setReason] = useState('');
  const now: Edited = { ...campaign, ...edited };
  const set = (change: Partial<Edited>) => setEdited({ ...edited, ...change });
  const dirty = Object.keys(edited).length > 0;
  const checked = campaignUpdate.safeParse({ ...edited, version: campaign.version });
  const complaint = (path: string) => (checked.success ? undefined : checked.error.issues.find((issue) => issue.path.join('.') === path)?.message);
  return (
    <form
      className="space-y-10"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        if (checked.success) update.mutate({ params: { campaign: campaign.slug }, body: { ...checked.data, reason } }, { onSuccess: () => { setEdited({}); setReason(''); } });
      }}
    >
      <fieldset disabled={!mayChange} className="space-y-10">
        <section aria-labelledby="about-title" className="grid max-w-3xl gap-4 sm:grid-cols-2">
          <h2 id="about-title" className="text-xl sm:col-span-2">About</h2>
          <TextField label="Title" value={now.title} onChange={(title) => set({ title })} error={complaint('title')} isDisabled={!mayChange} />
          <NumberField label="Quota" unit="GiB" value={now.quotaBytes / gibibyte} onChange={(value) => value !== null && set({ quotaBytes: Math.round(value * gibibyte) })} isDisabled={!mayChange} />
          <div className="sm:col-span-2"><TextField label="Description" multiline rows={3} value={now.description} onChange={(description) => set({ description })} isDisabled={!mayChange} /></div>
          <TextField label="Handling label" value={now.handlingLabel} onChange={(handlingLabel) => set({ handlingLabel })} isDisabled={!mayChange} />
          <TextField label="Licence of releases" value={now.licence} onChange={(licence) => set({ licence })} isDisabled={!mayChange} />
          <TextField label="Who answers questions" value={now.contact} onChange={(contact) => set({ contact })} isDisabled={!mayChange} />
        </section>
        <RangeRows title="Fields" noun="field" rows={now.fields} onChange={(fields) => set({ fields })} withRequired disabled={!mayChange} complaint={(row, key) => complaint(`fields.${row}.${key}`)} make={(row) => ({ ...row, required: true })} />
        <RangeRows title="Parameters" noun="parameter" rows={now.parameters} onChange={(parameters) => set({ parameters })} disabled={!mayChange} complaint={(row, key) => complaint(`parameters.${row}.${key}`)} make={(row) => row} />
        <Thresholds policy={now.policy} onChange={(policy) => set({ policy })} disabled={!mayChange} />
      </fieldset>
      <ErrorPanel error={update.error} />
      {mayChange && dirty && (
        <div className="sticky bottom-0 flex flex-wrap items-end gap-3 border-t border-rule bg-paper py-3">
          <div className="w-full max-w-md"><TextField label="Why (kept in the audit log)" value={reason} onChange={setReason} /></div>
          <Button kind="primary" type="submit" isPending={update.isPending} isDisabled={!checked.success}>Save</Button>
          <Button kind="quiet" onPress={() => setEdited({})}>Undo all changes</Button>
        </div>
      )}
    </form>
  );
}
