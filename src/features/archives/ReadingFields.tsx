/** Fields with name, unit and the meaning of each axis. */
import { axisNames, type ArchiveContents, type AxisName, type FieldReading, type Reading } from '#contract/reading.ts';
import { Button } from '../../components/Button.tsx';
import { Select } from '../../components/Select.tsx';
import { TextField } from '../../components/TextField.tsx';

interface Props {
  reading: Reading;
  contents: ArchiveContents;
  onChange?: (reading: Reading) => void;
}

const axisOptions = axisNames.map((name) => ({ id: name, label: name }));

export function ReadingFields({ reading, contents, onChange }: Props) {
  const shapeOf = new Map(contents.arrays.map((array) => [array.path, array.shape]));
  const set = (position: number, change: Partial<FieldReading>) =>
    onChange?.({ ...reading, fields: reading.fields.map((field, i) => (i === position ? { ...field, ...change, why: 'corrected by a person' } : field)) });
  const used = new Set(reading.fields.map((field) => field.path));
  const others = contents.arrays.filter((array) => !used.has(array.path) && array.shape.length > 0 && array.dtype !== 'string' && array.dtype !== 'other');
  const add = (path: string) => {
    const shape = shapeOf.get(path) ?? [];
    const pattern = reading.fields.find((field) => field.axes.length === shape.length)?.axes;
    const axes: AxisName[] = pattern ?? shape.map((_, i) => (i === 0 ? 'time' : 'node'));
    onChange?.({ ...reading, fields: [...reading.fields, { path, name: path.split('/').pop() ?? path, unit: null, axes, why: 'added by a person' }] });
  };
  return (
    <section aria-labelledby="fields-title" className="space-y-3">
      <h2 id="fields-title" className="text-xl">Fields</h2>
      {reading.fields.length === 0 && <p className="text-ink-soft">No array is read as a field yet.</p>}
      <ul className="divide-y divide-rule border-y border-rule">
        {reading.fields.map((field, position) => (
          <li key={field.path} className="space-y-3 py-4">
            <p className="flex flex-wrap items-baseline gap-x-3"><code className="font-mono">{field.path}</code><span className="text-sm text-ink-soft">{shapeOf.get(field.path)?.join(' x ')}; {field.why}</span></p>
            {onChange ? (
              <div className="flex flex-wrap items-end gap-3">
                <TextField label="Name" value={field.name} onChange={(name) => set(position, { name })} />
                <TextField label="Unit" value={field.unit ?? ''} onChange={(unit) => set(position, { unit: unit.trim() || null })} />
                {field.axes.map((axis, i) => (
                  <Select key={i} label={`Axis ${i + 1} (${shapeOf.get(field.path)?.[i] ?? '?'})`} value={axis} options={axisOptions}
                    onChange={(next) => set(position, { axes: field.axes.map((each, k) => (k === i ? (next as AxisName) : each)) })} />
                ))}
                <Button kind="quiet" onPress={() => onChange({ ...reading, fields: reading.fields.filter((_, i) => i !== position) })}>Not a field</Button>
              </div>
            ) : (
              <p className="text-sm">{field.name}, {field.unit ?? 'no unit'}; axes {field.axes.join(', ')}</p>
            )}
          </li>
        ))}
      </ul>
      {onChange && others.length > 0 && (
        <Select label="Read another array as a field" value={null} placeholder="Choose an array" options={others.slice(0, 500).map((array) => ({ id: array.path, label: `${array.path} (${array.shape.join(' x ')})` }))} onChange={add} />
      )}
    </section>
  );
}
