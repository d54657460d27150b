/** What this page is, whether it is sound, and what can be done: closed off by a graduated edge. */
import { useEffect } from 'react';
import { StatusMark, type MarkKind } from './StatusMark.tsx';

interface Props {
  /** the kind of thing, above its name */
  kicker?: React.ReactNode;
  title: string;
  lead?: React.ReactNode;
  status?: { kind: MarkKind; label: string } | React.ReactElement;
  actions?: React.ReactNode;
}

function isMark(status: NonNullable<Props['status']>): status is { kind: MarkKind; label: string } {
  return 'kind' in status && 'label' in status;
}

export function PageHeader({ kicker, title, lead, status, actions }: Props) {
  useEffect(() => {
    document.title = `${title} - Pennyweight`;
  }, [title]);
  return (
    <div className="mb-6">
      <div className="flex flex-wrap items-start justify-between gap-x-10 gap-y-4 pb-5">
        <div className="min-w-0 max-w-3xl">
          {kicker && <p className="plate">{kicker}</p>}
          <h1 className="text-2xl break-words sm:text-[2rem]">{title}</h1>
          {lead && <div className="mt-2 text-pretty text-ink-soft">{lead}</div>}
          {status && <div className="mt-3">{isMark(status) ? <StatusMark {...status} /> : status}</div>}
        </div>
        {actions && <div className="flex flex-wrap items-center gap-2">{actions}</div>}
      </div>
      <div aria-hidden className="graduated h-2.5" />
    </div>
  );
}
