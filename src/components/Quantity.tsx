/** A number with its unit. Shown with few digits; pointed at or copied it is exact. */
import { quantityText } from './number-format.ts';

export function Quantity({ value, unit = null }: { value: number | null | undefined; unit?: string | null }) {
  if (value === null || value === undefined) return <span className="text-ink-soft">-</span>;
  return (
    <span className="whitespace-nowrap tabular-nums">
      <data value={String(value)} title={String(value)} onCopy={(event) => { event.preventDefault(); event.clipboardData.setData('text/plain', String(value)); }}>{quantityText(value)}</data>
      {unit && <span className="text-ink-soft"> {unit}</span>}
    </span>
  );
}
