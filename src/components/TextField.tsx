/** A line or several lines of text; the complaint stands under it and is read with it. */
import { FieldError, Input, Label, Text, TextArea, TextField as AriaTextField, type TextFieldProps } from 'react-aria-components';
import { errorLook, inputLook, labelLook } from './field-look.ts';

interface Props extends Omit<TextFieldProps, 'className' | 'style' | 'children' | 'isInvalid' | 'type'> {
  label: string;
  type?: 'text' | 'email' | 'password' | 'search' | 'url' | 'date' | 'datetime-local';
  description?: React.ReactNode;
  error?: string;
  multiline?: boolean;
  rows?: number;
  mono?: boolean;
  placeholder?: string;
}

export function TextField({ label, description, error, multiline = false, rows = 3, mono = false, placeholder, type = 'text', ...props }: Props) {
  const look = `${inputLook} ${mono ? 'font-mono text-sm' : ''}`;
  return (
    <AriaTextField {...props} type={type as TextFieldProps['type']} isInvalid={error !== undefined} validationBehavior="aria" className="min-w-0 space-y-1">
      <Label className={labelLook}>{label}</Label>
      {multiline ? <TextArea rows={rows} className={`${look} resize-y`} placeholder={placeholder} spellCheck={!mono} /> : <Input className={look} placeholder={placeholder} spellCheck={mono ? false : undefined} />}
      {description && <Text slot="description" className="block text-sm text-ink-soft">{description}</Text>}
      <FieldError className={errorLook}>{error}</FieldError>
    </AriaTextField>
  );
}
