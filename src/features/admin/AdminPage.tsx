/** Accounts, invitations to the organisation, storage, jobs. */
import { useState } from 'react';
import { memberRoles, type MemberRole } from '#contract/access.ts';
import type { Account } from '#contract/account.ts';
import { routes } from '#contract/routes.ts';
import { useAbility, useMe } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { CheckboxGroup } from '../../components/Checkbox.tsx';
import { Dialog } from '../../components/Dialog.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { bytesText } from '../../components/number-format.ts';
import { PageHeader } from '../../components/PageHeader.tsx';
import { ProgressBar } from '../../components/ProgressBar.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { InvitationForm } from '../../evidence/InvitationForm.tsx';
import { InvitationList } from '../../evidence/InvitationList.tsx';

export function AdminPage() {
  const ability = useAbility();
  return (
    <>
      <PageHeader title="Administration" lead="People, storage and jobs of the whole installation." />
      <div className="space-y-12">
        <Accounts />
        {ability.can('create', 'Campaign') && (
          <section aria-labelledby="invite-title" className="space-y-4">
            <h2 id="invite-title" className="text-xl">Invite to the organisation</h2>
            <p className="max-w-prose text-ink-soft">A role given here holds in every campaign. To invite somebody to one campaign only, use its page of members.</p>
            <InvitationForm campaign={null} />
            <InvitationList campaign={null} />
          </section>
        )}
        <Storage />
        <Jobs />
      </div>
    </>
  );
}

function Accounts() {
  const ability = useAbility();
  const me = useMe();
  const accounts = useRoute(routes.listAccounts);
  const update = useRouteMutation(routes.updateAccount, [routes.listAccounts]);
  const [editing, setEditing] = useState<Account | null>(null);
  const mayChange = ability.can('update', 'User');
  return (
    <section aria-labelledby="accounts-title" className="space-y-3">
      <h2 id="accounts-title" className="text-xl">Accounts</h2>
      <ErrorPanel error={accounts.error ?? update.error} />
      {accounts.isPending && <Skeleton lines={5} label="Loading the accounts" />}
      <ul className="divide-y divide-rule border-y border-rule">
        {accounts.data?.accounts.map((account) => {
          const wide = account.roles.filter((each) => each.campaign === null).map((each) => each.role);
          return (
            <li key={account.id} className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 py-3">
              <div>
                <p className="font-medium">{account.name} {!account.active && <StatusMark kind="off" label="closed" />}</p>
                <p className="text-sm text-ink-soft">{account.email}; {wide.length > 0 ? `${wide.join(', ')} everywhere; ` : ''}{account.roles.filter((each) => each.campaign).map((each) => `${each.role} of ${each.campaign}`).join(', ') || 'no campaign'}</p>
              </div>
              {mayChange && account.id !== me?.user.id && (
                <div className="flex gap-2">
                  <Button kind="quiet" aria-label={`Roles of ${account.name} in the organisation`} onPress={() => setEditing(account)}>Roles</Button>
                  <Button kind="quiet" aria-label={account.active ? `Close the account of ${account.name}` : `Open the account of ${account.name} again`} onPress={() => update.mutate({ params: { account: account.id }, body: { active: !account.active } })}>{account.active ? 'Close' : 'Open again'}</Button>
                </div>
              )}
            </li>
          );
        })}
      </ul>
      {editing && <OrganisationRoles account={editing} onClose={() => setEditing(null)} />}
    </section>
  );
}

function OrganisationRoles({ account, onClose }: { account: Account; onClose: () => void }) {
  const [roles, setRoles] = useState<MemberRole[]>(account.roles.filter((each) => each.campaign === null).map((each) => each.role));
  const update = useRouteMutation(routes.updateAccount, [routes.listAccounts]);
  return (
    <Dialog title={`Roles of ${account.name} in every campaign`} isOpen onClose={onClose}>
      <div className="space-y-4">
        <CheckboxGroup label="Roles" value={roles} onChange={(next) => setRoles(next as MemberRole[])} options={memberRoles.map((role) => ({ id: role, label: role }))} />
        <ErrorPanel error={update.error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind="primary" isPending={update.isPending} onPress={() => update.mutate({ params: { account: account.id }, body: { roles } }, { onSuccess: onClose })}>Save the roles</Button>
        </div>
      </div>
    </Dialog>
  );
}

function Storage() {
  const storage = useRoute(routes.getStorage);
  return (
    <section aria-labelledby="storage-title" className="space-y-3">
      <h2 id="storage-title" className="text-xl">Storage</h2>
      <ErrorPanel error={storage.error} />
      {storage.data && (
        <>
          <p className="tabular-nums">{storage.data.objects} objects, {bytesText(storage.data.bytes)} held, {bytesText(storage.data.freeBytes)} free.</p>
          <div className="max-w-2xl space-y-3">{storage.data.campaigns.map((each) => <ProgressBar key={each.campaign} label={each.title} done={each.usedBytes} total={each.quotaBytes} unit="bytes" />)}</div>
        </>
      )}
    </section>
  );
}

const marks = { queued: 'waiting', running: 'working', done: 'sound', failed: 'blocker', cancelled: 'off' } as const;

function Jobs() {
  const jobs = useRoute(routes.listJobs, {}, {}, { refetchInterval: 5000 });
  return (
    <section aria-labelledby="jobs-title" className="space-y-3">
      <h2 id="jobs-title" className="text-xl">Jobs</h2>
      <ErrorPanel error={jobs.error} />
      <ul className="divide-y divide-rule border-y border-rule text-sm">
        {jobs.data?.jobs.slice(0, 50).map((job) => (
          <li key={job.id} className="flex flex-wrap items-baseline justify-between gap-x-6 py-2">
            <span className="flex items-baseline gap-4"><StatusMark kind={marks[job.state]} label={job.state} />{job.label}</span>
            <span className="text-ink-soft">{job.problem?.detail ?? <TimeStamp at={job.finishedAt ?? job.createdAt} />}</span>
          </li>
        ))}
      </ul>
    </section>
  );
}
