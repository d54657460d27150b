import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, it, vi } from 'vitest';
import { asksAgain } from '../../src/app/query-client.ts';
import { watchForms } from '../../src/app/first-problem.ts';
import { ApiProblem } from '../../src/api/api-problem.ts';
import { Dialog } from '../../src/components/Dialog.tsx';
import { NumberField } from '../../src/components/NumberField.tsx';
import { Select } from '../../src/components/Select.tsx';
import { TextField } from '../../src/components/TextField.tsx';

function Quota({ onValue }: { onValue: (value: number | null) => void }) {
  const [value, setValue] = useState<number | null>(2);
  return <NumberField label="Quota" unit="GiB" value={value} onChange={(next) => { setValue(next); onValue(next); }} />;
}

describe('a number field', () => {
  it('keeps what is being typed, tells the last number that was whole, and says what is wrong with the rest', async () => {
    const person = userEvent.setup();
    const told = vi.fn();
    render(<Quota onValue={told} />);
    const field = screen.getByRole('textbox', { name: /Quota/ });
    await person.clear(field);
    expect(told).toHaveBeenLastCalledWith(null);
    await person.type(field, '1e');
    expect(field).toHaveValue('1e');
    expect(field).toHaveAttribute('aria-invalid', 'true');
    expect(screen.getByText(/Write a number/)).toBeInTheDocument();
    await person.type(field, '-3');
    expect(told).toHaveBeenLastCalledWith(1e-3);
    await person.tab();
    expect(field).toHaveValue('0.001');
    expect(field).not.toHaveAttribute('aria-invalid');
  });
});

describe('a list to choose from', () => {
  it('does not pretend that the first option is chosen', async () => {
    const person = userEvent.setup();
    const chosen = vi.fn();
    render(<Select label="Rule" value={null} onChange={chosen} options={[{ id: 'a', label: 'first' }, { id: 'b', label: 'second' }]} />);
    expect(screen.getByRole('combobox', { name: 'Rule' })).toHaveDisplayValue('Choose');
    await person.selectOptions(screen.getByRole('combobox'), 'first');
    expect(chosen).toHaveBeenCalledExactlyOnceWith('a');
  });
  it('shows a value that is none of the options', () => {
    render(<Select label="Rule" value="gone" onChange={() => null} options={[{ id: 'a', label: 'first' }]} />);
    expect(screen.getByRole('combobox')).toHaveDisplayValue('gone');
  });
});

describe('a refused form', () => {
  it('puts the focus on its first complaint', async () => {
    const person = userEvent.setup();
    const end = watchForms(document);
    render(<form onSubmit={(event) => event.preventDefault()}><TextField label="Title" value="x" onChange={() => null} /><TextField label="Slug" value="X" onChange={() => null} error="use lower-case letters" /><button type="submit">Save</button></form>);
    await person.click(screen.getByRole('button', { name: 'Save' }));
    await vi.waitFor(() => expect(screen.getByRole('textbox', { name: 'Slug' })).toHaveFocus());
    expect(screen.getByRole('textbox', { name: 'Slug' })).toHaveAccessibleDescription('use lower-case letters');
    end();
  });
});

describe('a dialog', () => {
  it('closes by Escape, and not at all when it must be answered', async () => {
    const person = userEvent.setup();
    const close = vi.fn();
    const { rerender } = render(<Dialog title="Withdraw" isOpen onClose={close}><button type="button">Yes</button></Dialog>);
    expect(screen.getByRole('dialog', { name: 'Withdraw' })).toBeInTheDocument();
    await person.keyboard('{Escape}');
    expect(close).toHaveBeenCalledOnce();
    rerender(<Dialog title="Sign in" isOpen><button type="button">Yes</button></Dialog>);
    await person.keyboard('{Escape}');
    expect(screen.getByRole('dialog', { name: 'Sign in' })).toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Close' })).toBeNull();
  });
});

describe('asking the server again', () => {
  const refusal = (status: number) => new ApiProblem({ type: 'about:blank', title: 't', status, code: 'unavailable', detail: 'd' });
  it('is for lost connections and failing servers only, and ends', () => {
    expect([401, 403, 404, 409, 422].map((status) => asksAgain(0, refusal(status)))).toEqual([false, false, false, false, false]);
    expect([0, 500, 503].map((status) => asksAgain(1, refusal(status)))).toEqual([true, true, true]);
    expect(asksAgain(2, refusal(503))).toBe(false);
  });
});
