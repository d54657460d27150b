/** Every component and plot with invented data; only in development, to look at. */
import { lazy, Suspense, useState } from 'react';
import type { Beam as BeamData, FieldValues } from '#contract/shape.ts';
import { Button } from '../components/Button.tsx';
import { Checkbox, CheckboxGroup } from '../components/Checkbox.tsx';
import { CodeBlock } from '../components/CodeBlock.tsx';
import { ConfirmDialog } from '../components/ConfirmDialog.tsx';
import { DataTable, type Column } from '../components/DataTable.tsx';
import { DropZone } from '../components/DropZone.tsx';
import { EmptyState } from '../components/EmptyState.tsx';
import { Hash } from '../components/Hash.tsx';
import { KeyValue } from '../components/KeyValue.tsx';
import { LinkButton } from '../components/Link.tsx';
import { Notice } from '../components/Notice.tsx';
import { NumberField } from '../components/NumberField.tsx';
import { PageHeader } from '../components/PageHeader.tsx';
import { ProgressBar } from '../components/ProgressBar.tsx';
import { Quantity } from '../components/Quantity.tsx';
import { SegmentedControl } from '../components/SegmentedControl.tsx';
import { Select } from '../components/Select.tsx';
import { SeverityCounts } from '../components/SeverityCounts.tsx';
import { SeverityMark } from '../components/SeverityMark.tsx';
import { Skeleton } from '../components/Skeleton.tsx';
import { StatusMark } from '../components/StatusMark.tsx';
import { TextField } from '../components/TextField.tsx';
import { TimeStamp } from '../components/TimeStamp.tsx';

const Beam = lazy(() => import('../beam/Beam.tsx'));
const SpectrumPlot = lazy(() => import('../plots/SpectrumPlot.tsx'));
const FieldView = lazy(() => import('../plots/FieldView.tsx'));
const LineTrace = lazy(() => import('../plots/LineTrace.tsx'));

const plain: BeamData = { stamps: [], count: 0, unit: 's', weights: null, rule: null, marks: { gaps: [], duplicates: [], restarts: [] }, split: null, records: [] };

/** A record with a fine start, a gap, two duplicates and a restart. */
function troubled(): BeamData {
  const stamps: number[] = [];
  for (let j = 0; j < 40; j += 1) stamps.push(j * 0.01);
  for (let j = 0; j < 60; j += 1) stamps.push(0.4 + j * 0.03);
  stamps[70] = stamps[69];
  const restart = stamps.length;
  for (let j = 0; j < 50; j += 1) stamps.push(1.7 + j * 0.03);
  const gap = stamps.length - 1;
  for (let j = 0; j < 30; j += 1) stamps.push(3.9 + j * 0.03);
  const weights = stamps.map((_, j) => Math.abs((stamps[Math.min(stamps.length - 1, j + 1)] - stamps[Math.max(0, j - 1)]) / 2) % 0.5);
  return { ...plain, stamps, count: stamps.length, weights, rule: 'trapezoid', marks: { gaps: [gap], duplicates: [70], restarts: [restart] } };
}

function runs(): BeamData {
  const stamps: number[] = [];
  const records = [['run-a', 120], ['run-b', 80], ['run-c', 40]].map(([label, count]) => ({ label: String(label), from: 0, count: Number(count) }));
  records.forEach((record) => {
    record.from = stamps.length;
    for (let j = 0; j < record.count; j += 1) stamps.push(j * 0.05);
  });
  const split = stamps.map((_, j) => (j < 116 ? ('train' as const) : j < 124 ? ('guard' as const) : j < 200 ? ('validation' as const) : ('test' as const)));
  return { ...plain, stamps, count: stamps.length, weights: stamps.map((t) => 0.03 + 0.02 * Math.sin(t * 3)), rule: 'simpson', split, records };
}

function long(count: number): BeamData {
  return { ...plain, stamps: Array.from({ length: count }, (_, j) => j * 1e-4), count, weights: Array.from({ length: count }, (_, j) => 1e-4 * (1 + 0.6 * Math.sin(j / 4000))), rule: 'trapezoid' };
}

const uneven = Array.from({ length: 60 }, (_, i) => Math.sinh(i / 20));
function plane(index: number): FieldValues {
  const [ny, nx] = [60, 140];
  const values = Array.from({ length: nx * ny }, (_, k) => (k % 4001 === 9 ? null : Math.sin((k % nx) / 12 + index / 3) * Math.exp(-uneven[Math.floor(k / nx)] / 4)));
  return { label: `u, snapshot ${index}`, field: 'u', unit: 'm/s', axes: [{ name: 'y', unit: 'm', count: ny, nodes: uneven }, { name: 'x', unit: 'm', count: nx, nodes: Array.from({ length: nx }, (_, i) => i / 5) }], values, stride: [1, 1], min: -1, max: 1, time: index * 0.1, index, count: 40 };
}

function volume(): FieldValues {
  const values = Array.from({ length: 12 * 30 * 40 }, (_, k) => Math.cos((k % 40) / 7) * Math.sin(Math.floor(k / 40) / 30));
  return { label: 'p, mode 1', field: 'p', unit: 'Pa', axes: [{ name: 'z', unit: 'm', count: 12, nodes: null }, { name: 'y', unit: 'm', count: 30, nodes: null }, { name: 'x', unit: 'm', count: 40, nodes: null }], values, stride: [1, 1, 1], min: -1, max: 1, time: null, index: 0, count: 1 };
}

interface Row { id: number; name: string; bytes: number }
const rows: Row[] = Array.from({ length: 5000 }, (_, id) => ({ id, name: `wake-${id}`, bytes: (id * 7919) % 10_000 }));
const columns: Column<Row>[] = [
  { id: 'name', header: 'Archive', value: (row) => row.name },
  { id: 'bytes', header: 'Bytes', value: (row) => row.bytes, numeric: true },
  { id: 'state', header: 'State', value: (row) => (row.id % 3 ? 'checked' : 'being checked'), cell: (row) => <StatusMark kind={row.id % 3 ? 'sound' : 'working'} label={row.id % 3 ? 'checked' : 'being checked'} /> },
];

export function Specimen() {
  const [index, setIndex] = useState(0);
  const [selected, setSelected] = useState<number | null>(70);
  const [asking, setAsking] = useState(false);
  const [text, setText] = useState('');
  const [number, setNumber] = useState<number | null>(0.25);
  const [one, setOne] = useState<string | null>(null);
  const [view, setView] = useState<'open' | 'all'>('open');
  const [roles, setRoles] = useState<string[]>(['steward']);
  const [record] = useState(troubled);
  const [several] = useState(runs);
  const [many] = useState(() => long(100_000));
  const [cube] = useState(volume);
  const sigma = Array.from({ length: 80 }, (_, k) => 10 ** (2 - k / 5));
  return (
    <div className="space-y-12">
      <PageHeader kicker="Specimen" title="Wake behind a cylinder" lead="Every part once, with invented data." status={{ kind: 'caution', label: '2 open cautions: each needs a remedy.' }} actions={<><Button kind="primary" onPress={() => setAsking(true)}>Build the matrix</Button><Button kind="plain" isPending>Check again</Button><Button kind="quiet">Withdraw</Button><Button kind="danger">Remove</Button><LinkButton kind="plain" to="/">To the desk</LinkButton></>} />
      {asking && <ConfirmDialog title="Build the matrix" action="Build" pending={false} error={null} onClose={() => setAsking(false)} onConfirm={() => setAsking(false)}>It reads 4 GiB.</ConfirmDialog>}
      <Suspense fallback={<Skeleton lines={5} label="Loading" />}>
        <Beam {...record} label="Record of wake-12" selected={selected} onSelect={setSelected} second={{ label: 'equal', weights: record.stamps!.map(() => 0.02) }} />
        <Beam {...several} label="Columns of the matrix" />
        <Beam {...many} label="A long record" />
        <Beam {...plain} stamps={[0, 1, 3]} count={3} weights={[0.5, 2, -0.5]} rule="given" label="Three snapshots" />
        <SpectrumPlot singularValues={sigma} floor={sigma[0] * 1.5e-8} rank={{ '0.99': 5, '0.9999': 10 }} fileName="specimen" />
        <FieldView data={plane(index)} scale="sequential" onIndex={setIndex} isFetching={false} />
        <FieldView data={cube} scale="diverging" onIndex={() => null} isFetching={false} />
        <LineTrace label="norm of u" unit="m/s" x={record.stamps} xUnit="s" y={record.stamps!.map((t, j) => (j === 30 ? null : Math.sin(t * 4)))} />
      </Suspense>
      <section aria-label="Forms" className="grid max-w-3xl gap-4 sm:grid-cols-2">
        <TextField label="Title" value={text} onChange={setText} error={text === '' ? 'give a name' : undefined} />
        <NumberField label="Quota" unit="GiB" value={number} onChange={setNumber} />
        <Select label="Space rule" value={one} onChange={setOne} options={[{ id: 'a', label: 'cell volumes' }, { id: 'b', label: 'equal' }]} />
        <TextField label="Reason" multiline mono value={text} onChange={setText} />
        <Checkbox isSelected={number === null} onChange={(empty) => setNumber(empty ? null : 1)}>no quota</Checkbox>
        <CheckboxGroup label="Roles" value={roles} onChange={setRoles} options={['contributor', 'steward', 'modeler'].map((id) => ({ id, label: id }))} />
        <SegmentedControl label="Show" value={view} onChange={setView} options={[{ id: 'open', label: 'Open 2' }, { id: 'all', label: 'All 9' }]} />
      </section>
      <div className="flex flex-wrap gap-6">
        <SeverityMark severity="blocker" /><SeverityMark severity="caution" /><SeverityMark severity="note" />
        <SeverityCounts counts={{ blocker: 1, caution: 2, note: 3, waived: 1 }} />
        {(['sound', 'working', 'waiting', 'off'] as const).map((kind) => <StatusMark key={kind} kind={kind} label={kind} />)}
      </div>
      <div>{(['sound', 'note', 'caution', 'blocker'] as const).map((kind) => <Notice key={kind} kind={kind} title={`A ${kind}.`}>What to do about it.</Notice>)}</div>
      <ProgressBar label="Reading and checking" done={3.2e9} total={8e9} unit="bytes" rate={2.1e8} secondsLeft={23} />
      <ProgressBar label="Waiting" done={0} total={0} unit="bytes" />
      <KeyValue items={[{ label: 'Rows x columns', value: '8400 x 240' }, { label: 'Step', value: <Quantity value={0.1 + 0.2} unit="s" /> }, { label: 'SHA-256', value: <Hash value={'0123456789abcdef'.repeat(4)} /> }, { label: 'At', value: <TimeStamp at="2026-12-01T10:00:00Z" /> }]} />
      <EmptyState title="No archive yet.">Hand one in to begin.</EmptyState>
      <DropZone label="Choose files" hint="One HDF5 file, or several NPY files." onFiles={() => null} />
      <CodeBlock label="Recipe" text={JSON.stringify({ steps: [{ step: 'order', sort: true }] }, null, 2)} />
      <DataTable caption="Archives" columns={columns} rows={rows} rowId={(row) => String(row.id)} fileName="archives" />
    </div>
  );
}
