/** One of a few, shown side by side. */
import { Label, Radio, RadioGroup } from 'react-aria-components';

interface Props<T extends string> {
  label: string;
  value: T;
  onChange: (value: T) => void;
  options: { id: T; label: string }[];
}

export function SegmentedControl<T extends string>({ label, value, onChange, options }: Props<T>) {
  return (
    <RadioGroup value={value} onChange={(next) => onChange(next as T)} orientation="horizontal">
      <Label className="sr-only">{label}</Label>
      <div className="flex flex-wrap gap-x-1 gap-y-1">
        {options.map((option) => (
          <Radio key={option.id} value={option.id} className="flex min-h-9 cursor-pointer items-center border-b-2 border-transparent px-3 text-sm text-ink-soft max-sm:min-h-11 data-[focus-visible]:outline-2 data-[focus-visible]:outline-brass-deep data-[selected]:border-brass data-[selected]:font-medium data-[selected]:text-ink">
            {option.label}
          </Radio>
        ))}
      </div>
    </RadioGroup>
  );
}
