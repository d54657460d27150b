/** Invites a person by e-mail, to a campaign or (campaign null) to the organisation. */
import { useState } from 'react';
import { memberRoles, type MemberRole } from '#contract/access.ts';
import { newInvitation } from '#contract/account.ts';
import { routes } from '#contract/routes.ts';
import { useRouteMutation } from '../api/route-query.ts';
import { Button } from '../components/Button.tsx';
import { CheckboxGroup } from '../components/Checkbox.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { TextField } from '../components/TextField.tsx';

export function InvitationForm({ campaign }: { campaign: string | null }) {
  const [email, setEmail] = useState('');
  const [roles, setRoles] = useState<MemberRole[]>([]);
  const [tried, setTried] = useState(false);
  const [sentTo, setSentTo] = useState<string | null>(null);
  const create = useRouteMutation(routes.createInvitation, [routes.listInvitations]);
  const checked = newInvitation.safeParse({ email, campaign, roles });
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  return (
    <form
      className="max-w-xl space-y-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        setTried(true);
        if (!checked.success) return;
        create.mutate({ body: checked.data }, { onSuccess: () => { setSentTo(email); setEmail(''); setRoles([]); setTried(false); } });
      }}
    >
      <TextField label="E-mail address" type="email" value={email} onChange={setEmail} error={complaint('email')} />
      <CheckboxGroup label="Roles" value={roles} onChange={(next) => setRoles(next as MemberRole[])} options={memberRoles.map((role) => ({ id: role, label: role }))} error={complaint('roles')} />
      <ErrorPanel error={create.error} />
      <Button kind="plain" type="submit" isPending={create.isPending}>Send the invitation</Button>
      <p role="status" className="text-sm text-verdigris">{sentTo && `The invitation to ${sentTo} is on its way; it holds for seven days.`}</p>
    </form>
  );
}
