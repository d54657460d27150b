/** The matrix that was built from the draft. */
import { useState } from 'react';
import { keepPreviousData } from '@tanstack/react-query';
import { useOutletContext } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { MatrixView, type ValuesChoice } from '../../evidence/MatrixView.tsx';
import type { DraftOutlet } from './DraftPage.tsx';

export function DraftMatrix() {
  const { draft } = useOutletContext<DraftOutlet>();
  const [choice, setChoice] = useState<ValuesChoice>({ of: 'mode', index: 0, field: draft.build?.fields[0]?.name ?? '' });
  const ready = { enabled: draft.build !== null };
  const field = choice.field || draft.build?.fields[0]?.name || '';
  const beam = useRoute(routes.getDraftBeam, { draft: draft.id }, undefined, ready);
  const values = useRoute(routes.getDraftValues, { draft: draft.id }, { ...choice, field }, { ...ready, placeholderData: keepPreviousData });
  if (!draft.build) return <EmptyState title="Not built yet.">Build the matrix; its spectrum, modes and columns then appear here.</EmptyState>;
  return <MatrixView build={draft.build} beam={beam.data} values={{ data: values.data, error: values.error, isFetching: values.isFetching }} choice={{ ...choice, field }} onChoice={setChoice} fileName={`${draft.dataset}-draft-${draft.number}`} />;
}
