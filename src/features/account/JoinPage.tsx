/** Accepts an invitation: makes the account, or adds the roles to the one that the address has. */
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { acceptInvitation } from '#contract/account.ts';
import { routes } from '#contract/routes.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { Notice } from '../../components/Notice.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TextField } from '../../components/TextField.tsx';
import { EntryFrame } from './EntryFrame.tsx';

export function JoinPage() {
  const { secret = '' } = useParams();
  const invitation = useRoute(routes.viewInvitation, { secret }, undefined, { staleTime: Infinity });
  const accept = useRouteMutation(routes.acceptInvitation);
  const [name, setName] = useState('');
  const [password, setPassword] = useState('');
  const [tried, setTried] = useState(false);
  if (invitation.error) return <EntryFrame title="Invitation"><ErrorPanel error={invitation.error} /></EntryFrame>;
  if (!invitation.data) return <EntryFrame title="Invitation"><Skeleton lines={3} label="Loading the invitation" /></EntryFrame>;
  const { email, campaign, roles, invitedBy, hasAccount } = invitation.data;
  const checked = acceptInvitation.safeParse({ name, password });
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  if (accept.isSuccess) return <EntryFrame title="Welcome"><Notice kind="sound" title={`${email} is ready.`}><Link to="/sign-in">Sign in</Link></Notice></EntryFrame>;
  return (
    <EntryFrame title="Join" lead={`${invitedBy} invites ${email} as ${roles.join(', ')} to ${campaign ? `the campaign "${campaign}"` : 'the organisation'}.`}>
      <form
        className="space-y-4" noValidate
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (hasAccount) accept.mutate({ params: { secret }, body: { name: email, password: 'not used: the account exists' } });
          else if (checked.success) accept.mutate({ params: { secret }, body: checked.data });
        }}
      >
        {hasAccount ? <p>This address has an account already; the roles are added to it.</p> : (
          <>
            <TextField label="Your name" autoComplete="name" value={name} onChange={setName} error={complaint('name')} autoFocus />
            <TextField label="Password, at least 12 characters" type="password" autoComplete="new-password" value={password} onChange={setPassword} error={complaint('password')} />
          </>
        )}
        <ErrorPanel error={accept.error} />
        <Button kind="primary" type="submit" isPending={accept.isPending}>Accept the invitation</Button>
      </form>
    </EntryFrame>
  );
}
