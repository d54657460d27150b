/** A number with its unit; empty is null. Any notation that JavaScript reads is taken (1e-3), and kept while it is typed. */
import { useState } from 'react';
import { FieldError, Input, Label, TextField } from 'react-aria-components';
import { errorLook, inputLook, labelLook } from './field-look.ts';
import { quantityText } from './number-format.ts';

interface Props {
  label: string;
  value: number | null;
  onChange: (value: number | null) => void;
  unit?: string | null;
  error?: string;
  placeholder?: string;
  isDisabled?: boolean;
}

export function NumberField({ label, value, onChange, unit, error, placeholder, isDisabled }: Props) {
  const [typed, setTyped] = useState<string | null>(null);
  const shown = typed ?? (value === null ? '' : quantityText(value, 12));
  const wrong = typed !== null && typed.trim() !== '' && !Number.isFinite(Number(typed));
  const complaint = wrong ? 'This is not a number.' : error;
  return (
    <TextField
      value={shown} isDisabled={isDisabled} isInvalid={complaint !== undefined} className="space-y-1"
      onChange={(text) => {
        setTyped(text);
        if (text.trim() === '') onChange(null);
        else if (Number.isFinite(Number(text))) onChange(Number(text));
      }}
      onBlur={() => !wrong && setTyped(null)}
    >
      <Label className={labelLook}>{label}{unit && <span className="font-normal text-ink-soft"> ({unit})</span>}</Label>
      <Input inputMode="decimal" placeholder={placeholder} className={`${inputLook} text-right tabular-nums`} />
      <FieldError className={errorLook}>{complaint}</FieldError>
    </TextField>
  );
}
