/** A built matrix: beam, numbers, spectrum, and any column, mode or the mean as a field. Shared by draft and release pages. */
import { lazy, Suspense, useState } from 'react';
import type { BuildSummary } from '#contract/dataset.ts';
import type { Beam, FieldValues } from '#contract/shape.ts';
import type { ApiProblem } from '../api/api-problem.ts';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { Hash } from '../components/Hash.tsx';
import { KeyValue } from '../components/KeyValue.tsx';
import { bytesText, quantityText } from '../components/number-format.ts';
import { Select } from '../components/Select.tsx';
import { Skeleton } from '../components/Skeleton.tsx';
import { RecordBeam } from './RecordBeam.tsx';

const SpectrumPlot = lazy(() => import('../plots/SpectrumPlot.tsx'));
const FieldView = lazy(() => import('../plots/FieldView.tsx'));

export interface ValuesChoice {
  of: 'column' | 'mode' | 'mean';
  index: number;
  field: string;
}

interface Props {
  build: BuildSummary;
  beam: Beam | undefined;
  values: { data: FieldValues | undefined; error: ApiProblem | null; isFetching: boolean };
  choice: ValuesChoice;
  onChoice: (choice: ValuesChoice) => void;
  fileName: string;
}

export function MatrixView({ build, beam, values, choice, onChoice, fileName }: Props) {
  const [selected, setSelected] = useState<number | null>(null);
  const kinds = [{ id: 'mode', label: 'modes' }, { id: 'column', label: 'columns' }, ...(build.centred === 'nothing' ? [] : [{ id: 'mean', label: 'what was subtracted' }])].filter((kind) => kind.id !== 'mode' || build.modes > 0);
  return (
    <div className="space-y-10">
      {beam && <RecordBeam beam={beam} label="Columns of the matrix" selected={selected} onSelect={(index) => { setSelected(index); if (index !== null) onChoice({ ...choice, of: 'column', index }); }} />}
      <KeyValue
        items={[
          { label: 'Rows x columns', value: `${build.rows} x ${build.columns}` },
          { label: 'Type', value: `${build.type}, ${bytesText(build.bytes)}` },
          { label: 'Rank for 99 % of the energy', value: build.spectrum.rank['0.99'] ?? '-' },
          { label: 'Rank for 99.99 %', value: build.spectrum.rank['0.9999'] ?? '-' },
          { label: 'Time rule, duration', value: `${build.timeRule}, ${quantityText(build.duration)}` },
          { label: 'Space rule', value: `${build.spaceRule.chosen}, sum ${quantityText(build.spaceRule.sum)}` },
          { label: 'Fields', value: build.fields.map((field) => `${field.name}${field.unit ? ` (${field.unit})` : ''}`).join(', ') },
          { label: 'Split', value: build.split.map((part) => `${part.part} ${part.columns}`).join(', ') },
          { label: 'Largest rounding error of the cast', value: build.castError === 0 ? 'none' : quantityText(build.castError) },
          { label: 'SHA-256 of the matrix', value: <Hash value={build.matrixSha256} label="SHA-256 of the matrix" /> },
        ]}
      />
      <section aria-labelledby="spectrum-title" className="space-y-3">
        <h2 id="spectrum-title" className="text-xl">Spectrum</h2>
        <Suspense fallback={<Skeleton lines={8} label="Loading the spectrum" />}>
          <SpectrumPlot singularValues={build.spectrum.singular_values} floor={build.spectrum.floor} rank={build.spectrum.rank} fileName={`${fileName}-spectrum`} />
        </Suspense>
      </section>
      <section aria-labelledby="field-title" className="space-y-3">
        <h2 id="field-title" className="text-xl">Fields</h2>
        <div className="flex flex-wrap gap-4">
          <Select label="Show" value={choice.of} options={kinds} onChange={(of) => onChoice({ ...choice, of: of as ValuesChoice['of'], index: 0 })} />
          <Select label="Field" value={choice.field} options={build.fields.map((field) => ({ id: field.name, label: field.name }))} onChange={(field) => onChoice({ ...choice, field })} />
        </div>
        <ErrorPanel error={values.error} />
        {values.data ? (
          <Suspense fallback={<Skeleton lines={10} label="Loading the field view" />}>
            <FieldView data={values.data} scale={choice.of === 'mode' || (choice.of === 'column' && build.centred !== 'nothing') ? 'diverging' : 'sequential'} onIndex={(index) => onChoice({ ...choice, index })} isFetching={values.isFetching} />
          </Suspense>
        ) : !values.error && <Skeleton lines={10} label="Loading the values" />}
      </section>
    </div>
  );
}
