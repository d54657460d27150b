/** The state of a thing: shape and word. */
import { MarkShape, markColour, type MarkKind } from './MarkShape.tsx';

export type { MarkKind };

export function StatusMark({ kind, label }: { kind: MarkKind; label: string }) {
  return (
    <span className={`inline-flex items-baseline gap-1.5 text-sm font-medium ${markColour[kind]}`}>
      <MarkShape kind={kind} className="translate-y-0.5" /> {label}
    </span>
  );
}
