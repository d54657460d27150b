/** One choice, or a group of them. */
import { Checkbox as AriaCheckbox, CheckboxGroup as AriaGroup, FieldError, Label, type CheckboxProps } from 'react-aria-components';
import { errorLook, labelLook } from './field-look.ts';

export function Checkbox({ children, ...props }: CheckboxProps & { children: React.ReactNode }) {
  return (
    <AriaCheckbox {...props} className="group inline-flex min-h-9 cursor-pointer items-center gap-2 max-sm:min-h-11 data-[disabled]:opacity-60">
      <span aria-hidden className="grid size-4.5 shrink-0 place-items-center rounded-[2px] border border-rule-strong bg-sheet text-on-brass group-data-[focus-visible]:outline-2 group-data-[focus-visible]:outline-offset-2 group-data-[focus-visible]:outline-brass-deep group-data-[selected]:border-brass-deep group-data-[selected]:bg-brass-deep">
        <svg viewBox="0 0 12 12" className="hidden size-3 group-data-[selected]:block" fill="none" stroke="currentColor" strokeWidth="2"><path d="M2 6.5 5 9.5 10 3" /></svg>
      </span>
      <span>{children}</span>
    </AriaCheckbox>
  );
}

interface GroupProps {
  label: string;
  value: string[];
  onChange: (value: string[]) => void;
  options: { id: string; label: string }[];
  error?: string;
}

export function CheckboxGroup({ label, value, onChange, options, error }: GroupProps) {
  return (
    <AriaGroup value={value} onChange={onChange} isInvalid={error !== undefined} className="space-y-1">
      <Label className={labelLook}>{label}</Label>
      <div className="flex flex-wrap gap-x-5">
        {options.map((option) => <Checkbox key={option.id} value={option.id}>{option.label}</Checkbox>)}
      </div>
      <FieldError className={errorLook}>{error}</FieldError>
    </AriaGroup>
  );
}
