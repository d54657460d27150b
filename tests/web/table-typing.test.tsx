/**
 * Typing into the find field as a browser delivers it: one key after the other, without waiting for React's transitions. The router
 * changes the address in a transition, so a field that showed the address alone would lose every key that comes before it.
 */
import { render, screen } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { DataTable, type Column } from '../../src/components/DataTable.tsx';

const columns: Column<string>[] = [{ id: 'run', header: 'Run', value: (run) => run }];
/** The machine may be busy. */
const patience = { timeout: 10_000 };
const runs = Array.from({ length: 13 }, (_, k) => `wake-${k}`);

function show() {
  const router = createMemoryRouter([{ path: '/', element: <DataTable caption="Archives" columns={columns} rows={runs} rowId={(run) => run} fileName="archives" /> }]);
  render(<RouterProvider router={router} />);
  return { router, field: screen.getByRole<HTMLInputElement>('searchbox', { name: 'Find in this table' }) };
}

/** A key as the browser does it: into what the field shows at this moment. */
function press(field: HTMLInputElement, key: string) {
  const at = field.selectionStart ?? field.value.length;
  const put = Object.getOwnPropertyDescriptor(HTMLInputElement.prototype, 'value')!.set!;
  put.call(field, field.value.slice(0, at) + key + field.value.slice(at));
  field.setSelectionRange(at + 1, at + 1);
  field.dispatchEvent(new InputEvent('input', { bubbles: true, data: key }));
}

describe('the find field of a table', () => {
  const environment = globalThis as { IS_REACT_ACT_ENVIRONMENT?: boolean };
  beforeEach(() => { environment.IS_REACT_ACT_ENVIRONMENT = false; });
  afterEach(() => { environment.IS_REACT_ACT_ENVIRONMENT = true; });

  it('loses no key of a fast typist, and the address follows', async () => {
    const { router, field } = show();
    field.focus();
    for (const key of 'wake-12') press(field, key);
    expect(field).toHaveValue('wake-12');
    await vi.waitFor(() => expect(router.state.location.search).toBe('?find=wake-12'), patience);
    await vi.waitFor(() => expect(screen.getByText('1 of 13 rows')).toBeInTheDocument(), patience);
    expect(field).toHaveValue('wake-12');
  });

  it('keeps the cursor where it is when something is put into the middle', async () => {
    const { router, field } = show();
    field.focus();
    for (const key of 'wa12') press(field, key);
    await vi.waitFor(() => expect(router.state.location.search).toBe('?find=wa12'), patience);
    field.setSelectionRange(2, 2);
    for (const key of 'ke-') press(field, key);
    expect(field).toHaveValue('wake-12');
    expect(field.selectionStart).toBe(5);
  });

  it('shows what the address says once the field is left', async () => {
    const { router, field } = show();
    field.focus();
    for (const key of 'wake-3') press(field, key);
    await vi.waitFor(() => expect(router.state.location.search).toBe('?find=wake-3'), patience);
    field.blur();
    await router.navigate('/?find=wake-5');
    await vi.waitFor(() => expect(field).toHaveValue('wake-5'), patience);
  });
});
