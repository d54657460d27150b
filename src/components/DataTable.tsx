/**
 * A table that sorts, filters, keeps both in the address, exports what it shows, and draws only the rows in view when there are many.
 * It scrolls in its own box, never the page.
 */
import { useMemo, useRef } from 'react';
import { getCoreRowModel, getFilteredRowModel, getSortedRowModel, useReactTable, type ColumnDef } from '@tanstack/react-table';
import { useVirtualizer } from '@tanstack/react-virtual';
import { Button } from './Button.tsx';
import { csvText } from './csv.ts';
import { SortHeader } from './SortHeader.tsx';
import { saveFile } from './save-file.ts';
import { useTableState } from './table-state.ts';
import { TextField } from './TextField.tsx';
import { useTrailingText } from './trailing-text.ts';

export interface Column<T> {
  id: string;
  header: string;
  /** sorted by, filtered by, exported */
  value: (row: T) => string | number | null;
  /** shown and filtered by instead of the value */
  text?: (row: T) => string;
  cell?: (row: T) => React.ReactNode;
  /** right-aligned */
  numeric?: boolean;
}

interface Props<T> {
  caption: string;
  columns: Column<T>[];
  rows: T[];
  rowId: (row: T) => string;
  /** of the CSV file, without extension */
  fileName: string;
  /** when two tables share a page: begins their names in the address */
  stateKey?: string;
}

/** Beyond this many rows only those in view are drawn. */
const drawAll = 100;
const rowHeight = 41;

export function DataTable<T>({ caption, columns, rows, rowId, fileName, stateKey = '' }: Props<T>) {
  const [state, setState] = useTableState(stateKey);
  const typing = useTrailingText(state.find, (text) => setState({ find: text }));
  const box = useRef<HTMLDivElement>(null);
  const shown = (column: Column<T>, row: T) => column.text?.(row) ?? String(column.value(row) ?? '');
  const definitions = useMemo<ColumnDef<T>[]>(
    () => columns.map((column) => ({
      id: column.id,
      accessorFn: column.value,
      sortingFn: (a, b) => compare(column.value(a.original), column.value(b.original)),
    })),
    [columns],
  );
  const { find, sort } = state;
  const [sortId, desc] = [sort?.id, sort?.desc ?? false];
  const sorting = useMemo(() => (sortId !== undefined && columns.some((column) => column.id === sortId) ? [{ id: sortId, desc }] : []), [sortId, desc, columns]);
  const table = useReactTable({
    data: rows, columns: definitions, getRowId: rowId,
    state: { sorting, globalFilter: find },
    // There are no pages; resetting them after each new order would draw for ever.
    autoResetAll: false,
    getCoreRowModel: getCoreRowModel(), getSortedRowModel: getSortedRowModel(), getFilteredRowModel: getFilteredRowModel(),
    getColumnCanGlobalFilter: () => true,
    globalFilterFn: (row, id, words: string) => shown(columns.find((column) => column.id === id)!, row.original).toLowerCase().includes(words.trim().toLowerCase()),
  });
  const view = table.getRowModel().rows;
  const many = view.length > drawAll;
  const virtual = useVirtualizer({ count: view.length, getScrollElement: () => box.current, estimateSize: () => rowHeight, overscan: 12, enabled: many });
  const drawn = many ? virtual.getVirtualItems() : view.map((_, index) => ({ index, start: 0, end: 0 }));
  const before = many ? (drawn[0]?.start ?? 0) : 0;
  const after = many ? virtual.getTotalSize() - (drawn.at(-1)?.end ?? 0) : 0;
  const exportRows = () => saveFile(`${fileName}.csv`, csvText([columns.map((column) => column.header), ...view.map((row) => columns.map((column) => column.value(row.original)))]), 'text/csv;charset=utf-8');

  return (
    <section aria-label={caption} className="min-w-0 space-y-3">
      <div data-no-print className="flex flex-wrap items-end justify-between gap-x-6 gap-y-2">
        <div className="w-full max-w-xs"><TextField label="Find in this table" type="search" {...typing} /></div>
        <div className="flex items-center gap-4 text-sm text-ink-soft">
          <span role="status" className="tabular-nums">{view.length === rows.length ? `${rows.length} rows` : `${view.length} of ${rows.length} rows`}</span>
          <Button kind="quiet" onPress={exportRows}>Export CSV</Button>
        </div>
      </div>
      <div ref={box} role="region" tabIndex={0} aria-label={`${caption}, scrolls`} className={`overflow-auto border-y border-rule-strong -outline-offset-2 ${many ? 'max-h-[70vh]' : ''}`}>
        <table aria-rowcount={view.length + 1} className="w-full border-separate border-spacing-0 text-[0.9375rem]">
          <caption className="sr-only">{caption}</caption>
          <thead>
            <tr aria-rowindex={1}>
              {columns.map((column) => (
                <SortHeader key={column.id} label={column.header} numeric={column.numeric} direction={sortId === column.id ? (desc ? 'descending' : 'ascending') : null}
                  onSort={(direction) => setState({ sort: direction === null ? null : { id: column.id, desc: direction === 'descending' } })} />
              ))}
            </tr>
          </thead>
          <tbody>
            {before > 0 && <tr aria-hidden style={{ height: before }}><td colSpan={columns.length} /></tr>}
            {drawn.map(({ index }) => {
              const row = view[index];
              return (
                <tr key={row.id} data-index={index} ref={many ? virtual.measureElement : undefined} aria-rowindex={index + 2} className="hover:bg-paper-raised">
                  {columns.map((column) => (
                    <td key={column.id} className={`border-b border-rule px-3 py-2 align-baseline first:pl-1 ${column.numeric ? 'text-right whitespace-nowrap tabular-nums' : ''}`}>
                      {column.cell ? column.cell(row.original) : shown(column, row.original)}
                    </td>
                  ))}
                </tr>
              );
            })}
            {after > 0 && <tr aria-hidden style={{ height: after }}><td colSpan={columns.length} /></tr>}
            {view.length === 0 && <tr><td colSpan={columns.length} className="px-1 py-6 text-ink-soft">No row contains these words. <Button kind="quiet" onPress={() => setState({ find: '' })}>Show all rows</Button></td></tr>}
          </tbody>
        </table>
      </div>
    </section>
  );
}

const collator = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** Numbers by size, texts as people read them, nothing first. */
function compare(a: string | number | null, b: string | number | null): number {
  if (a === null || b === null) return Number(a !== null) - Number(b !== null);
  return typeof a === 'number' && typeof b === 'number' ? a - b : collator.compare(String(a), String(b));
}
