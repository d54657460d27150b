/** Invitations that are open or were, with the way to take one back. */
import { routes } from '#contract/routes.ts';
import { useRoute, useRouteMutation } from '../api/route-query.ts';
import { Button } from '../components/Button.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { TimeStamp } from '../components/TimeStamp.tsx';

export function InvitationList({ campaign }: { campaign: string | null }) {
  const invitations = useRoute(routes.listInvitations, {}, campaign ? { campaign } : {});
  const revoke = useRouteMutation(routes.revokeInvitation, [routes.listInvitations]);
  const shown = (invitations.data?.invitations ?? []).filter((invitation) => invitation.campaign === campaign);
  if (shown.length === 0) return <ErrorPanel error={invitations.error} />;
  return (
    <>
      <ErrorPanel error={invitations.error ?? revoke.error} />
      <ul className="divide-y divide-rule border-y border-rule text-sm">
        {shown.map((invitation) => (
          <li key={invitation.id} className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 py-2">
            <span>{invitation.email}: {invitation.roles.join(', ')}; invited by {invitation.invitedBy}</span>
            <span className="flex items-baseline gap-3 text-ink-soft">
              {invitation.state === 'open' ? <>until <TimeStamp at={invitation.expiresAt} /></> : invitation.state}
              {invitation.state === 'open' && <Button kind="quiet" aria-label={`Take the invitation to ${invitation.email} back`} onPress={() => revoke.mutate({ params: { invitation: invitation.id } })}>Take back</Button>}
            </span>
          </li>
        ))}
      </ul>
    </>
  );
}
