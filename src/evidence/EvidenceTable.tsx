/** The evidence of a finding, folded away until asked for: indices, times and whatever else the check states. */
import { quantityText } from '../components/number-format.ts';
import type { ShownFinding } from './finding-filter.ts';

function text(value: unknown): string {
  if (typeof value === 'number') return quantityText(value);
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return value.map(text).join(', ');
  return JSON.stringify(value);
}

/** 'firstNode' -> 'first node' */
const words = (key: string) => key.replace(/([A-Z])/g, ' $1').toLowerCase();

export function EvidenceTable({ finding }: { finding: ShownFinding }) {
  const { indices = [], times = [], count, ...rest } = finding.evidence;
  const others = Object.entries(rest).filter(([, value]) => value !== undefined && value !== null);
  if (indices.length === 0 && others.length === 0 && !finding.path) return null;
  return (
    <details className="text-sm">
      <summary className="cursor-pointer text-ink-soft">Evidence</summary>
      <dl className="mt-2 grid grid-cols-[max-content_1fr] gap-x-4 gap-y-1">
        {finding.path && <Row name="array"><code className="font-mono">{finding.path}</code></Row>}
        {indices.length > 0 && (
          <Row name={count !== undefined && count > indices.length ? `indices (first ${indices.length} of ${count})` : 'indices'}>{indices.join(', ')}</Row>
        )}
        {times.length > 0 && <Row name="times">{times.map((time) => quantityText(time)).join(', ')}</Row>}
        {others.map(([key, value]) => (
          <Row key={key} name={words(key)}>{text(value)}</Row>
        ))}
      </dl>
    </details>
  );
}

function Row({ name, children }: { name: string; children: React.ReactNode }) {
  return (
    <>
      <dt className="text-ink-soft">{name}</dt>
      <dd className="min-w-0 break-words tabular-nums">{children}</dd>
    </>
  );
}
