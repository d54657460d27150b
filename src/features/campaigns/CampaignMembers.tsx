/** Members, their roles, and invitations. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about, memberRoles, type MemberRole } from '#contract/access.ts';
import type { Member } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { CheckboxGroup } from '../../components/Checkbox.tsx';
import { ConfirmDialog } from '../../components/ConfirmDialog.tsx';
import { Dialog } from '../../components/Dialog.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { InvitationForm } from '../../evidence/InvitationForm.tsx';
import { InvitationList } from '../../evidence/InvitationList.tsx';
import type { CampaignOutlet } from './CampaignPage.tsx';

export function CampaignMembers() {
  const { campaign } = useOutletContext<CampaignOutlet>();
  const ability = useAbility();
  const facts = { campaignId: campaign.id };
  const mayChange = ability.can('update', about('Membership', facts));
  const members = useRoute(routes.listMembers, { campaign: campaign.slug });
  const remove = useRouteMutation(routes.removeMember, [routes.listMembers, routes.getCampaign]);
  const [editing, setEditing] = useState<Member | null>(null);
  const [removing, setRemoving] = useState<Member | null>(null);
  if (members.error) return <ErrorPanel error={members.error} />;
  if (!members.data) return <Skeleton lines={6} label="Loading the members" />;
  return (
    <div className="space-y-8">
      <ul className="divide-y divide-rule border-y border-rule">
        {members.data.members.map((member) => (
          <li key={member.person.id} className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-2 py-3">
            <div>
              <p className="font-medium">{member.person.name}</p>
              <p className="text-sm text-ink-soft">{member.email}; {member.roles.join(', ')}; since <TimeStamp at={member.since} /></p>
            </div>
            {mayChange && (
              <div className="flex gap-2">
                <Button kind="quiet" aria-label={`Change the roles of ${member.person.name}`} onPress={() => setEditing(member)}>Change roles</Button>
                <Button kind="quiet" aria-label={`Remove ${member.person.name}`} onPress={() => setRemoving(member)}>Remove</Button>
              </div>
            )}
          </li>
        ))}
      </ul>
      {ability.can('create', about('Invitation', facts)) && (
        <section aria-labelledby="invite-title" className="space-y-4">
          <h2 id="invite-title" className="text-xl">Invite a person</h2>
          <InvitationForm campaign={campaign.slug} />
          <InvitationList campaign={campaign.slug} />
        </section>
      )}
      {editing && <RolesDialog campaign={campaign.slug} member={editing} onClose={() => setEditing(null)} />}
      {removing && (
        <ConfirmDialog
          title={`Remove ${removing.person.name}`} action="Remove the member" danger pending={remove.isPending} error={remove.error} onClose={() => setRemoving(null)}
          onConfirm={() => remove.mutate({ params: { campaign: campaign.slug, account: removing.person.id } }, { onSuccess: () => setRemoving(null) })}
        >
          They can no longer see this campaign. What they handed in, built or decided stays with their name in the audit log.
        </ConfirmDialog>
      )}
    </div>
  );
}

function RolesDialog({ campaign, member, onClose }: { campaign: string; member: Member; onClose: () => void }) {
  const [roles, setRoles] = useState<MemberRole[]>(member.roles);
  const put = useRouteMutation(routes.putMember, [routes.listMembers]);
  return (
    <Dialog title={`Roles of ${member.person.name}`} isOpen onClose={onClose}>
      <div className="space-y-4">
        <CheckboxGroup label="Roles in this campaign" value={roles} onChange={(next) => setRoles(next as MemberRole[])} options={memberRoles.map((role) => ({ id: role, label: role }))} />
        <ErrorPanel error={put.error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind="primary" isPending={put.isPending} isDisabled={roles.length === 0} onPress={() => put.mutate({ params: { campaign, account: member.person.id }, body: { roles } }, { onSuccess: onClose })}>Save the roles</Button>
        </div>
      </div>
    </Dialog>
  );
}
