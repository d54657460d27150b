/** Something that a person should know here and now: what is the matter and, as children, what to do. */
import { MarkShape, markColour } from './MarkShape.tsx';

type NoticeKind = 'sound' | 'note' | 'caution' | 'blocker';

const edge: Record<NoticeKind, string> = { sound: 'border-verdigris', note: 'border-rule-strong', caution: 'border-amber', blocker: 'border-oxide' };

export function Notice({ kind, title, children }: { kind: NoticeKind; title: string; children?: React.ReactNode }) {
  return (
    <div className={`my-4 grid grid-cols-[auto_1fr] gap-x-3 border-y border-l-4 ${edge[kind]} border-y-rule bg-paper-raised px-4 py-3`}>
      <MarkShape kind={kind} className="mt-1.5" />
      <div className="min-w-0">
        <p className={`font-medium ${kind === 'note' ? '' : markColour[kind]}`}>{title}</p>
        {children && <div className="mt-1 text-pretty break-words">{children}</div>}
      </div>
    </div>
  );
}
