/** One choice, or a group of them. */
import { Checkbox as AriaCheckbox, CheckboxGroup as AriaGroup, FieldError, Label, Text, type CheckboxProps } from 'react-aria-components';
import { errorLook, labelLook } from './field-look.ts';

export function Checkbox({ children, ...props }: Omit<CheckboxProps, 'className' | 'style' | 'children'> & { children: React.ReactNode }) {
  return (
    <AriaCheckbox {...props} className="group flex min-h-9 w-fit cursor-pointer items-center gap-2.5 max-sm:min-h-11 disabled:cursor-not-allowed disabled:text-ink-soft">
      <span aria-hidden className="grid size-4.5 shrink-0 place-items-center rounded-[2px] border border-rule-strong bg-paper-raised text-paper group-selected:border-ink group-selected:bg-ink group-focus-visible:outline-2 group-focus-visible:outline-offset-2 group-focus-visible:outline-brass group-disabled:opacity-60">
        <svg viewBox="0 0 12 12" className="hidden size-3 group-selected:block" fill="none" stroke="currentColor" strokeWidth="2"><path d="M2 6.500 5 9.500 10 3" /></svg>
      </span>
      <span className="min-w-0">{children}</span>
    </AriaCheckbox>
  );
}

interface GroupProps {
  label: string;
  value: string[];
  onChange: (value: string[]) => void;
  options: readonly { id: string; label: React.ReactNode; isDisabled?: boolean }[];
  description?: React.ReactNode;
  error?: string;
  isDisabled?: boolean;
}

export function CheckboxGroup({ label, options, description, error, ...props }: GroupProps) {
  return (
    <AriaGroup {...props} isInvalid={error !== undefined} validationBehavior="aria" className="space-y-1">
      <Label className={labelLook}>{label}</Label>
      {description && <Text slot="description" className="block text-sm text-ink-soft">{description}</Text>}
      <div className="flex flex-wrap gap-x-6">
        {options.map((option) => <Checkbox key={option.id} value={option.id} isDisabled={option.isDisabled}>{option.label}</Checkbox>)}
      </div>
      <FieldError className={errorLook}>{error}</FieldError>
    </AriaGroup>
  );
}
