/**
 * A number with its unit; empty is null. Takes 0.25, 1e-3 or -4 and keeps what is being typed until the field is left, so that a
 * half-written number is never replaced under the cursor. (The library's own number field knows no powers of ten.)
 */
import { useState } from 'react';
import { FieldError, Input, Label, Text, TextField, type TextFieldProps } from 'react-aria-components';
import { errorLook, inputLook, labelLook } from './field-look.ts';

interface Props extends Omit<TextFieldProps, 'className' | 'style' | 'children' | 'isInvalid' | 'value' | 'defaultValue' | 'onChange' | 'onBlur' | 'type'> {
  label: string;
  value: number | null;
  onChange: (value: number | null) => void;
  unit?: string | null;
  description?: React.ReactNode;
  error?: string;
  placeholder?: string;
}

/** The number that a text says: null for an empty one, undefined where it says none. A comma is refused: it could mean either sign. */
export function readNumber(text: string): number | null | undefined {
  const bare = text.trim().replace(/^[−–]/, '-');
  if (bare === '') return null;
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(bare) && Number.isFinite(Number(bare)) ? Number(bare) : undefined;
}

export function NumberField({ label, value, onChange, unit, description, error, placeholder, ...props }: Props) {
  const [typed, setTyped] = useState<string | null>(null);
  const wrong = typed !== null && readNumber(typed) === undefined;
  const complaint = wrong ? 'Write a number, for example 0.25 or 1e-3.' : error;
  return (
    <TextField
      {...props} value={typed ?? (value === null ? '' : String(value))} isInvalid={complaint !== undefined} validationBehavior="aria" className="min-w-0 space-y-1"
      onChange={(text) => {
        setTyped(text);
        const number = readNumber(text);
        if (number !== undefined) onChange(number);
      }}
      onBlur={() => { if (!wrong) setTyped(null); }}
    >
      <Label className={labelLook}>{label}{unit ? <span className="font-normal text-ink-soft"> in {unit}</span> : null}</Label>
      <Input inputMode="decimal" autoComplete="off" placeholder={placeholder} className={`${inputLook} text-right tabular-nums`} />
      {description && <Text slot="description" className="block text-sm text-ink-soft">{description}</Text>}
      <FieldError className={errorLook}>{complaint}</FieldError>
    </TextField>
  );
}
