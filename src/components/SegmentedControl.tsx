/** One of a few views, side by side; they wrap on a narrow screen. */
import { Label, Radio, RadioGroup } from 'react-aria-components';

interface Props<T extends string> {
  label: string;
  value: T;
  onChange: (value: T) => void;
  options: readonly { id: T; label: React.ReactNode }[];
}

export function SegmentedControl<T extends string>({ label, value, onChange, options }: Props<T>) {
  return (
    <RadioGroup value={value} onChange={(next) => onChange(next as T)} orientation="horizontal">
      <Label className="sr-only">{label}</Label>
      <div className="flex flex-wrap gap-x-1 gap-y-1">
        {options.map((option) => (
          <Radio key={option.id} value={option.id} className="flex min-h-9 cursor-pointer items-center border-b-2 border-rule px-3 text-sm text-ink-soft tabular-nums max-sm:min-h-11 hover:text-ink focus-visible:outline-2 focus-visible:outline-brass selected:border-brass selected:font-medium selected:text-ink">
            {option.label}
          </Radio>
        ))}
      </div>
    </RadioGroup>
  );
}
