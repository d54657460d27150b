/** Rows of named quantities with unit and limits: fields or parameters of a campaign. */
import { Button } from '../../components/Button.tsx';
import { Checkbox } from '../../components/Checkbox.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { TextField } from '../../components/TextField.tsx';

interface Row {
  name: string;
  unit: string | null;
  min: number | null;
  max: number | null;
}

interface Props<T extends Row> {
  title: string;
  noun: string;
  rows: T[];
  onChange: (rows: T[]) => void;
  make: (row: Row) => T;
  complaint: (row: number, key: string) => string | undefined;
  withRequired?: boolean;
  disabled: boolean;
}

export function RangeRows<T extends Row & { required?: boolean }>({ title, noun, rows, onChange, make, complaint, withRequired = false, disabled }: Props<T>) {
  const set = (position: number, change: Partial<T>) => onChange(rows.map((row, i) => (i === position ? { ...row, ...change } : row)));
  const id = `${noun}-title`;
  return (
    <section aria-labelledby={id} className="space-y-4">
      <h2 id={id} className="text-xl">{title}</h2>
      {rows.length === 0 && <p className="text-ink-soft">None yet. {noun === 'field' ? 'Archives are then checked without limits and units.' : 'Runs are then not asked for parameter values.'}</p>}
      <ul className="space-y-4">
        {rows.map((row, i) => (
          <li key={i} className="grid items-end gap-3 border-t border-rule pt-4 sm:grid-cols-[2fr_1fr_1fr_1fr_auto]">
            <TextField label={`Name of ${noun} ${i + 1}`} value={row.name} onChange={(name) => set(i, { name } as Partial<T>)} error={complaint(i, 'name')} isDisabled={disabled} />
            <TextField label="Unit" value={row.unit ?? ''} onChange={(unit) => set(i, { unit: unit.trim() || null } as Partial<T>)} isDisabled={disabled} />
            <NumberField label="From" value={row.min} onChange={(min) => set(i, { min } as Partial<T>)} isDisabled={disabled} />
            <NumberField label="To" value={row.max} onChange={(max) => set(i, { max } as Partial<T>)} error={complaint(i, 'max')} isDisabled={disabled} />
            <div className="flex items-center gap-3">
              {withRequired && <Checkbox isSelected={row.required ?? true} onChange={(required) => set(i, { required } as Partial<T>)} isDisabled={disabled}>required</Checkbox>}
              {!disabled && <Button kind="quiet" aria-label={`Remove ${noun} ${row.name || i + 1}`} onPress={() => onChange(rows.filter((_, k) => k !== i))}>Remove</Button>}
            </div>
          </li>
        ))}
      </ul>
      {!disabled && <Button kind="plain" onPress={() => onChange([...rows, make({ name: '', unit: null, min: null, max: null })])}>Add a {noun}</Button>}
    </section>
  );
}
