/** The frame of the pages before sign-in. */
import { useEffect } from 'react';

export function EntryFrame({ title, lead, children }: { title: string; lead?: string; children: React.ReactNode }) {
  useEffect(() => {
    document.title = `${title} - Pennyweight`;
  }, [title]);
  return (
    <div className="mx-auto max-w-md py-10">
      <h1 className="graduated pb-4 text-3xl">{title}</h1>
      {lead && <p className="mt-4 text-pretty text-ink-soft">{lead}</p>}
      <div className="mt-6">{children}</div>
    </div>
  );
}
