/** One of several: the browser's own list, which every keyboard, screen reader and telephone knows. */
import { useId } from 'react';
import { errorLook, inputLook, labelLook } from './field-look.ts';

interface Props {
  label: string;
  value: string | null;
  options: readonly { id: string; label: string }[];
  onChange: (value: string) => void;
  placeholder?: string;
  description?: React.ReactNode;
  error?: string;
  isDisabled?: boolean;
}

export function Select({ label, value, options, onChange, placeholder = 'Choose', description, error, isDisabled = false }: Props) {
  const id = useId();
  const notes = [description ? `${id}-description` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  // A value that is none of the options stays visible instead of turning silently into the first option.
  const stranger = value === null || !options.some((option) => option.id === value);
  return (
    <div className="w-full max-w-md min-w-0 space-y-1 sm:w-auto">
      <label htmlFor={id} className={labelLook}>{label}</label>
      <select
        id={id} className={`${inputLook} cursor-pointer`} value={value ?? ''} disabled={isDisabled} aria-invalid={error ? true : undefined} aria-describedby={notes || undefined}
        onChange={(event) => onChange(event.target.value)}
      >
        {stranger && <option value={value ?? ''} disabled>{value || placeholder}</option>}
        {options.map((option) => <option key={option.id} value={option.id}>{option.label}</option>)}
      </select>
      {description && <span id={`${id}-description`} className="block text-sm text-ink-soft">{description}</span>}
      {error && <span id={`${id}-error`} className={errorLook}>{error}</span>}
    </div>
  );
}
