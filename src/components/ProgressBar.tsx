/** Long work: how much, how fast, how long still. */
import { Label, ProgressBar as AriaProgressBar } from 'react-aria-components';
import { bytesText, durationText, quantityText, rateText } from './number-format.ts';

interface Props {
  label: string;
  done: number;
  /** 0: not known yet */
  total: number;
  unit: string;
  rate?: number | null;
  secondsLeft?: number | null;
}

export function ProgressBar({ label, done, total, unit, rate = null, secondsLeft = null }: Props) {
  const known = total > 0;
  const amount = (value: number) => (unit === 'bytes' ? bytesText(value) : quantityText(value));
  const parts = [known ? `${amount(done)} of ${amount(total)}${unit === 'bytes' ? '' : ` ${unit}`}` : '', rateText(rate, unit), secondsLeft === null ? '' : `${durationText(secondsLeft)} left`].filter(Boolean);
  const words = parts.join(', ');
  return (
    <AriaProgressBar value={known ? Math.min(done, total) : 0} maxValue={known ? total : 1} isIndeterminate={!known} valueLabel={words || 'not known yet'} className="my-3 max-w-3xl">
      {({ percentage }) => (
        <>
          <span className="flex flex-wrap items-baseline justify-between gap-x-6 text-sm">
            <Label className="font-medium">{label}</Label>
            <span className="text-ink-soft tabular-nums">{words}</span>
          </span>
          <span className="mt-1 block h-2.5 overflow-hidden border border-rule-strong bg-paper-raised">
            <span className={`block h-full bg-brass ${known ? 'transition-[width] duration-300' : 'w-1/4 animate-pulse'}`} style={known ? { width: `${percentage}%` } : undefined} />
          </span>
        </>
      )}
    </AriaProgressBar>
  );
}
