/** The letters that the demo's own SMTP server caught. */
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';

export function DemoInboxPage() {
  const inbox = useRoute(routes.listInbox, {}, undefined, { refetchInterval: 3000 });
  return (
    <>
      <PageHeader title="Demo inbox" lead="Letters that this demo would have sent. A real installation sends them by SMTP, and has no such page." />
      <ErrorPanel error={inbox.error} />
      {inbox.isPending && <Skeleton lines={4} label="Loading the letters" />}
      {inbox.data?.messages.length === 0 && <EmptyState title="No letter yet.">Invite somebody, or ask for a new password.</EmptyState>}
      <ul className="divide-y divide-rule border-y border-rule">
        {inbox.data?.messages.map((letter) => (
          <li key={letter.id} className="space-y-2 py-4">
            <h2 className="text-lg">{letter.subject}</h2>
            <p className="text-sm text-ink-soft">to {letter.to}, <TimeStamp at={letter.at} /></p>
            <p className="break-words whitespace-pre-wrap">{letter.text}</p>
            {letter.links.map((link) => <p key={link}><a className="break-all text-brass-deep underline" href={link}>{link}</a></p>)}
          </li>
        ))}
      </ul>
    </>
  );
}
