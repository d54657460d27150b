/** How the states of drafts and releases are marked, one word each. */
import type { DraftState } from '#contract/dataset.ts';
import type { MarkKind } from '../components/StatusMark.tsx';

interface Mark {
  kind: MarkKind;
  label: string;
}

export const draftStateMark: Record<DraftState, Mark> = {
  draft: { kind: 'working', label: 'draft' },
  submitted: { kind: 'waiting', label: 'waits for a steward' },
  returned: { kind: 'caution', label: 'returned' },
  approved: { kind: 'working', label: 'approved, release is being made' },
  released: { kind: 'sound', label: 'released' },
  superseded: { kind: 'off', label: 'superseded' },
  withdrawn: { kind: 'off', label: 'withdrawn' },
};

export const releaseStateMark: Record<'released' | 'superseded' | 'withdrawn', Mark> = {
  released: { kind: 'sound', label: 'released' },
  superseded: { kind: 'off', label: 'superseded' },
  withdrawn: { kind: 'blocker', label: 'withdrawn' },
};
