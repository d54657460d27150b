/** One of several: the browser's own list, which every keyboard and screen reader knows. */
import { useId } from 'react';
import { inputLook, labelLook } from './field-look.ts';

interface Props {
  label: string;
  value: string | null;
  options: { id: string; label: string }[];
  onChange: (value: string) => void;
  placeholder?: string;
  isDisabled?: boolean;
}

export function Select({ label, value, options, onChange, placeholder, isDisabled }: Props) {
  const id = useId();
  return (
    <div className="space-y-1">
      <label htmlFor={id} className={labelLook}>{label}</label>
      <select id={id} className={`${inputLook} pr-8`} value={value ?? ''} disabled={isDisabled} onChange={(event) => onChange(event.target.value)}>
        {placeholder !== undefined && <option value="" disabled>{placeholder}</option>}
        {options.map((option) => <option key={option.id} value={option.id}>{option.label}</option>)}
      </select>
    </div>
  );
}
