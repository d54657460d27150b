/** A line or several lines of text, with its complaint below. */
import { FieldError, Input, Label, TextArea, TextField as AriaTextField } from 'react-aria-components';
import { errorLook, inputLook, labelLook } from './field-look.ts';

interface Props {
  label: string;
  value: string;
  onChange: (value: string) => void;
  type?: 'text' | 'email' | 'password' | 'search' | 'datetime-local';
  error?: string;
  multiline?: boolean;
  rows?: number;
  mono?: boolean;
  placeholder?: string;
  autoFocus?: boolean;
  autoComplete?: string;
  isRequired?: boolean;
  isDisabled?: boolean;
  name?: string;
}

export function TextField({ label, error, multiline = false, rows = 3, mono = false, placeholder, type = 'text', ...props }: Props) {
  const look = `${inputLook} ${mono ? 'font-mono text-sm' : ''}`;
  return (
    <AriaTextField {...props} type={type} isInvalid={error !== undefined} className="space-y-1">
      <Label className={labelLook}>{label}</Label>
      {multiline ? <TextArea rows={rows} className={look} placeholder={placeholder} /> : <Input className={look} placeholder={placeholder} />}
      <FieldError className={errorLook}>{error}</FieldError>
    </AriaTextField>
  );
}
