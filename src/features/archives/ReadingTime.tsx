/** Where the time stamps come from. */
import type { ArchiveContents, Reading, TimeSource } from '#contract/reading.ts';
import { NumberField } from '../../components/NumberField.tsx';
import { Select } from '../../components/Select.tsx';
import { TextField } from '../../components/TextField.tsx';

interface Props {
  reading: Reading;
  contents: ArchiveContents;
  onChange?: (reading: Reading) => void;
}

/** The choices as one list: each 1-D array, and what a person can declare. */
function idOf(time: TimeSource | null): string {
  if (time === null) return 'none';
  return time.kind === 'array' ? `array:${time.path}` : time.kind;
}

function sentence(time: TimeSource | null): string {
  switch (time?.kind) {
    case 'array': return `the array ${time.path}`;
    case 'step-attribute': return `attribute ${time.name} of each step's group`;
    case 'step-dataset': return `dataset ${time.name} in each step's group`;
    case 'step-name': return "the number in each step group's name";
    case 'generated': return `start ${time.start}, step ${time.step}`;
    case 'ensemble': return 'none: the snapshots are an ensemble';
    default: return 'unknown: only the order is known';
  }
}

export function ReadingTime({ reading, contents, onChange }: Props) {
  const time = reading.time;
  const unit = time && time.kind !== 'ensemble' ? time.unit : null;
  const vectors = contents.arrays.filter((array) => array.shape.length === 1 && array.shape[0]! > 0 && array.dtype !== 'string' && array.dtype !== 'other');
  const options = [
    ...(time === null ? [{ id: 'none', label: 'unknown: only the order is known' }] : []),
    ...(time && time.kind.startsWith('step') ? [{ id: time.kind, label: sentence(time) }] : []),
    ...vectors.map((array) => ({ id: `array:${array.path}`, label: `array ${array.path} (${array.shape[0]})` })),
    { id: 'generated', label: 'start and step, given here' },
    { id: 'ensemble', label: 'none: the snapshots are an ensemble' },
  ];
  const choose = (id: string) => {
    if (id.startsWith('array:')) onChange?.({ ...reading, time: { kind: 'array', path: id.slice(6), unit } });
    else if (id === 'generated') onChange?.({ ...reading, time: { kind: 'generated', start: 0, step: 1, unit } });
    else if (id === 'ensemble') onChange?.({ ...reading, time: { kind: 'ensemble' } });
  };
  const set = (change: Partial<Extract<TimeSource, { kind: 'generated' }>>) => time && onChange?.({ ...reading, time: { ...time, ...change } as TimeSource });
  return (
    <section aria-labelledby="time-title" className="space-y-3">
      <h2 id="time-title" className="text-xl">Time</h2>
      {onChange ? (
        <div className="grid max-w-3xl gap-4 sm:grid-cols-[2fr_1fr_1fr_1fr]">
          <Select label="Stamps come from" value={idOf(time)} options={options} onChange={choose} />
          {time && time.kind !== 'ensemble' && <TextField label="Unit" value={unit ?? ''} onChange={(text) => set({ unit: text.trim() || null })} />}
          {time?.kind === 'generated' && <NumberField label="Start" value={time.start} onChange={(value) => value !== null && set({ start: value })} />}
          {time?.kind === 'generated' && <NumberField label="Step" value={time.step} onChange={(value) => value !== null && set({ step: value })} />}
        </div>
      ) : (
        <p>Stamps come from {sentence(time)}{unit ? `, in ${unit}` : ''}.</p>
      )}
    </section>
  );
}
