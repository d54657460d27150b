/** One shape a meaning, so that no meaning hangs on colour alone. */
export type MarkKind = 'sound' | 'note' | 'caution' | 'blocker' | 'working' | 'waiting' | 'off';

export const markColour: Record<MarkKind, string> = {
  sound: 'text-verdigris', note: 'text-ink-soft', caution: 'text-amber', blocker: 'text-oxide', working: 'text-brass-deep', waiting: 'text-ink-soft', off: 'text-ink-soft',
};

const shapes: Record<MarkKind, React.ReactNode> = {
  // level beam, warning triangle, closed octagon, ring, half-filled disc, hourglass, struck ring
  sound: <path d="M1.500 7.500l3.700 4L12.500 3" fill="none" stroke="currentColor" strokeWidth="2.200" />,
  note: <circle cx="7" cy="7" r="4.800" fill="none" stroke="currentColor" strokeWidth="1.800" />,
  caution: <path d="M7 1.200l6.300 11.300H.7z" fill="currentColor" />,
  blocker: <path d="M4.300.8h5.400l3.500 3.500v5.400l-3.500 3.500H4.300L.8 9.700V4.300z" fill="currentColor" />,
  working: <><circle cx="7" cy="7" r="5" fill="none" stroke="currentColor" strokeWidth="1.800" /><path d="M7 2a5 5 0 010 10z" fill="currentColor" /></>,
  waiting: <path d="M2.500 1.500h9L7.700 7l3.800 5.500h-9L6.300 7z" fill="none" stroke="currentColor" strokeWidth="1.600" />,
  off: <><circle cx="7" cy="7" r="4.800" fill="none" stroke="currentColor" strokeWidth="1.600" /><path d="M3.600 10.400l6.800-6.800" stroke="currentColor" strokeWidth="1.600" /></>,
};

export function MarkShape({ kind, className = '' }: { kind: MarkKind; className?: string }) {
  return <svg aria-hidden viewBox="0 0 14 14" className={`inline-block h-3.5 w-3.5 shrink-0 ${markColour[kind]} ${className}`}>{shapes[kind]}</svg>;
}
