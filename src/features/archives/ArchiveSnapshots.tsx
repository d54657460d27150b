/** Any snapshot of any field as an image, slice or line. */
import { lazy, Suspense, useState } from 'react';
import { keepPreviousData } from '@tanstack/react-query';
import { useOutletContext, useSearchParams } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Select } from '../../components/Select.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import type { ArchiveOutlet } from './ArchivePage.tsx';

const FieldView = lazy(() => import('../../plots/FieldView.tsx'));

export function ArchiveSnapshots() {
  const { archive } = useOutletContext<ArchiveOutlet>();
  const [search, setSearch] = useSearchParams();
  const field = search.get('field') ?? archive.fields[0] ?? '';
  const [index, setIndex] = useState(Number(search.get('index') ?? 0));
  const snapshot = useRoute(routes.getArchiveSnapshot, { archive: archive.id }, { field, index }, { enabled: archive.state === 'checked' && field !== '', placeholderData: keepPreviousData, staleTime: Infinity });
  if (archive.state !== 'checked' || field === '') return <EmptyState title="No snapshot to show.">{archive.state === 'checking' ? 'The archive is being read.' : 'The reading names no field: correct it first.'}</EmptyState>;
  return (
    <div className="space-y-4">
      <Select label="Field" value={field} options={archive.fields.map((name) => ({ id: name, label: name }))} onChange={(next) => setSearch({ field: next, index: String(index) }, { replace: true })} />
      <ErrorPanel error={snapshot.error} />
      {snapshot.data ? (
        <Suspense fallback={<Skeleton lines={10} label="Loading the field view" />}>
          <FieldView data={snapshot.data} scale="sequential" onIndex={setIndex} isFetching={snapshot.isFetching} />
        </Suspense>
      ) : (
        !snapshot.error && <Skeleton lines={10} label="Loading the snapshot" />
      )}
    </div>
  );
}
