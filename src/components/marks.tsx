/** The shapes that go with severities and states, so that colour never stands alone. */
export type MarkKind = 'sound' | 'working' | 'waiting' | 'caution' | 'blocker' | 'note' | 'off';

const paths: Record<MarkKind, string> = {
  sound: 'M2 6.5 5 9.5 10 2.5',
  working: 'M6 1.5a4.5 4.5 0 1 1-4.5 4.5',
  waiting: 'M6 1.5a4.5 4.5 0 1 1 0 9a4.5 4.5 0 1 1 0-9M6 3.5V6l2 1.5',
  caution: 'M6 1.5 11 10.5H1ZM6 5v2.4M6 8.6v.6',
  blocker: 'M3.7 1h4.6L11 3.7v4.6L8.3 11H3.7L1 8.3V3.7ZM4 4l4 4M8 4 4 8',
  note: 'M6 1a5 5 0 1 1 0 10a5 5 0 1 1 0-10M6 5.4v3.2M6 3.2v.8',
  off: 'M2 6h8',
};

export const markColour: Record<MarkKind, string> = {
  sound: 'text-verdigris', working: 'text-brass-deep', waiting: 'text-brass-deep', caution: 'text-amber', blocker: 'text-oxide', note: 'text-ink-soft', off: 'text-ink-soft',
};

export function MarkShape({ kind }: { kind: MarkKind }) {
  return <svg aria-hidden viewBox="0 0 12 12" className="size-3.5 shrink-0" fill="none" stroke="currentColor" strokeWidth="1.3" strokeLinejoin="round" strokeLinecap="round"><path d={paths[kind]} /></svg>;
}
