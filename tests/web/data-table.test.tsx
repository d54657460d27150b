import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import { csvCell, csvText } from '../../src/components/csv.ts';
import { DataTable, type Column } from '../../src/components/DataTable.tsx';
import { readTableState } from '../../src/components/table-state.ts';

interface Row { id: string; run: string; bytes: number | null }
const columns: Column<Row>[] = [
  { id: 'run', header: 'Run', value: (row) => row.run },
  { id: 'bytes', header: 'Bytes', value: (row) => row.bytes, numeric: true, text: (row) => (row.bytes === null ? 'unknown' : `${row.bytes} B`) },
];
const rows: Row[] = [{ id: 'b', run: 'run-9', bytes: 100 }, { id: 'a', run: 'run-10', bytes: 9 }, { id: 'c', run: 'run-1', bytes: null }];

function Address() {
  return <output>{useLocation().search}</output>;
}

function show(at = '/', given = rows) {
  render(<MemoryRouter initialEntries={[at]}><DataTable caption="Archives" columns={columns} rows={given} rowId={(row) => row.id} fileName="archives" /><Address /></MemoryRouter>);
}
const firstColumn = () => screen.getAllByRole('row').slice(1).map((row) => within(row).getAllByRole('cell')[0].textContent);

describe('a table', () => {
  it('sorts as people count, both ways and back, and says so', async () => {
    const person = userEvent.setup();
    show();
    const head = screen.getByRole('columnheader', { name: 'Run' });
    await person.click(within(head).getByRole('button'));
    expect(firstColumn()).toEqual(['run-1', 'run-9', 'run-10']);
    expect(head).toHaveAttribute('aria-sort', 'ascending');
    await person.click(within(head).getByRole('button'));
    expect(firstColumn()).toEqual(['run-10', 'run-9', 'run-1']);
    await person.click(within(head).getByRole('button'));
    expect(firstColumn()).toEqual(['run-9', 'run-10', 'run-1']);
    expect(head).toHaveAttribute('aria-sort', 'none');
    expect(screen.getByText('3 rows')).toBeInTheDocument();
  });
  it('sorts numbers by size, what is unknown first', async () => {
    show('/?sort=bytes');
    expect(firstColumn()).toEqual(['run-1', 'run-10', 'run-9']);
  });
  it('filters by what is shown and keeps it in the address', async () => {
    const person = userEvent.setup();
    show();
    await person.type(screen.getByRole('searchbox', { name: 'Find in this table' }), 'UNKNOWN');
    expect(firstColumn()).toEqual(['run-1']);
    expect(screen.getByText('1 of 3 rows')).toBeInTheDocument();
    expect(screen.getAllByRole('status').at(-1)).toHaveTextContent('find=UNKNOWN');
  });
  it('offers the way back when nothing is left', async () => {
    const person = userEvent.setup();
    show('/?find=nothing-like-it');
    await person.click(screen.getByRole('button', { name: 'Show all rows' }));
    expect(firstColumn()).toHaveLength(3);
  });
  it('draws only a part of 5,000 rows and says how many there are', () => {
    show('/', Array.from({ length: 5000 }, (_, i) => ({ id: String(i), run: `run-${i}`, bytes: i })));
    expect(screen.getByRole('table')).toHaveAttribute('aria-rowcount', '5001');
    expect(screen.getAllByRole('row').length).toBeLessThan(200);
  });
  it('ignores an unknown column in the address', () => {
    show('/?sort=-nonsense');
    expect(firstColumn()).toEqual(['run-9', 'run-10', 'run-1']);
    expect(readTableState(new URLSearchParams('t.sort=-run&t.find=a'), 't.')).toEqual({ sort: { id: 'run', desc: true }, find: 'a' });
  });
});

describe('the export', () => {
  it('disarms what a spreadsheet would run, and leaves numbers alone', () => {
    expect(['=1+1', '+a', '-a', '@a', '\ta', 'a=b'].map(csvCell)).toEqual(["'=1+1", "'+a", "'-a", "'@a", "'\ta", 'a=b']);
    expect([csvCell(-1.5), csvCell(0.1 + 0.2), csvCell(null), csvCell(NaN)]).toEqual(['-1.5', '0.30000000000000004', '', '']);
  });
  it('quotes as RFC 4180 says', () => {
    expect(csvText([['a "b"', 'c,d'], ['e\nf', 1]])).toBe('"a ""b""","c,d"\r\n"e\nf",1\r\n');
  });
});
