/** The beam as a table: every snapshot; of many, only those in view are drawn. */
import { useMemo, useRef } from 'react';
import { useVirtualizer } from '@tanstack/react-virtual';
import { quantityText } from '../components/number-format.ts';
import type { BeamRecord, Weights } from './beam-record.ts';
import { partWords, recordLabel } from './snapshot-words.ts';

/** Beyond this many rows only those in view are drawn. */
const drawAll = 100;
const rowHeight = 29;

export function BeamTable({ record, label, second }: { record: BeamRecord; label: string; second?: Weights }) {
  const box = useRef<HTMLDivElement>(null);
  const virtual = useVirtualizer({ count: record.count, getScrollElement: () => box.current, estimateSize: () => rowHeight, overscan: 20, enabled: record.count > drawAll });
  const marked = useMemo(() => {
    const words = new Map<number, string[]>();
    const add = (indices: number[], word: string) => indices.forEach((j) => words.set(j, [...(words.get(j) ?? []), word]));
    add(record.marks.duplicates, 'repeated stamp');
    add(record.marks.restarts, 'first after a restart');
    add(record.marks.gaps, 'a gap follows');
    return words;
  }, [record.marks]);
  const several = record.records.length > 1;
  const heads = ['Index from 0', ...(several ? ['Record'] : []), ...(record.stamps ? [`Time${record.unit ? ` in ${record.unit}` : ''}`] : []), ...(record.weights ? [`Weight${record.rule ? `, ${record.rule}` : ''}`] : []), ...(second ? [`Weight, ${second.label}`] : []), ...(record.split ? ['Part'] : []), 'Marks'];
  const many = record.count > drawAll;
  const items = many ? virtual.getVirtualItems() : Array.from({ length: record.count }, (_, index) => ({ index, start: 0, end: 0 }));
  const before = items[0]?.start ?? 0;
  const after = many ? virtual.getTotalSize() - (items.at(-1)?.end ?? 0) : 0;
  return (
    <div ref={box} role="region" aria-label={`${label}, as a table`} tabIndex={0} className="max-h-80 overflow-auto border-y border-rule -outline-offset-2">
      <table aria-rowcount={record.count + 1} className="w-full border-separate border-spacing-0 text-sm tabular-nums">
        <caption className="sr-only">{label}</caption>
        <thead>
          <tr aria-rowindex={1}>{heads.map((head) => <th key={head} scope="col" className="sticky top-0 border-b border-rule-strong bg-paper px-3 py-1.5 text-right font-medium whitespace-nowrap">{head}</th>)}</tr>
        </thead>
        <tbody>
          {before > 0 && <tr aria-hidden style={{ height: before }}><td colSpan={heads.length} /></tr>}
          {items.map(({ index }) => (
            <tr key={index} aria-rowindex={index + 2} className="[&>td]:border-b [&>td]:border-rule [&>td]:px-3 [&>td]:py-1 [&>td]:text-right [&>td]:whitespace-nowrap">
              <td>{index}</td>
              {several && <td>{recordLabel(record, index)}</td>}
              {record.stamps && <td title={String(record.stamps[index])}>{quantityText(record.stamps[index], 8)}</td>}
              {record.weights && <td title={String(record.weights[index])}>{quantityText(record.weights[index])}</td>}
              {second && <td title={String(second.weights[index])}>{quantityText(second.weights[index])}</td>}
              {record.split && <td>{partWords[record.split[index]]}</td>}
              <td>{marked.get(index)?.join(', ')}</td>
            </tr>
          ))}
          {after > 0 && <tr aria-hidden style={{ height: after }}><td colSpan={heads.length} /></tr>}
        </tbody>
      </table>
    </div>
  );
}
