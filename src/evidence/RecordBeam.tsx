/** The beam of a record as the server states it (contract/shape.ts, Beam), wherever a record is shown. */
import { lazy, Suspense } from 'react';
import type { Beam as BeamData } from '#contract/shape.ts';
import { Skeleton } from '../components/Skeleton.tsx';

const Beam = lazy(() => import('../beam/Beam.tsx'));

interface Props {
  beam: BeamData;
  label: string;
  second?: { label: string; weights: number[] };
  selected?: number | null;
  onSelect?: (index: number | null) => void;
  window?: { from: number; to: number } | null;
  onWindow?: (window: { from: number; to: number } | null) => void;
}

export function RecordBeam({ beam, ...rest }: Props) {
  return (
    <Suspense fallback={<Skeleton lines={5} label="Loading the beam" />}>
      <Beam stamps={beam.stamps} count={beam.count} unit={beam.unit} weights={beam.weights} rule={beam.rule} marks={beam.marks} split={beam.split} records={beam.records} {...rest} />
    </Suspense>
  );
}
