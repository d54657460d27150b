/** A checksum: its beginning to compare by eye, the whole of it to copy. */
import { CopyButton } from './CopyButton.tsx';

export function Hash({ value, label = 'SHA-256' }: { value: string; label?: string }) {
  return (
    <span className="inline-flex flex-wrap items-baseline gap-x-1">
      <code className="font-mono text-sm" title={value} onCopy={(event) => { event.preventDefault(); event.clipboardData.setData('text/plain', value); }}>
        <span aria-hidden>{value.slice(0, 16)}…</span>
        <span className="sr-only">{label} {value}</span>
      </code>
      <CopyButton text={value} label={`Copy ${label}`} />
    </span>
  );
}
