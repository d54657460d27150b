import { act, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import Beam from '../../src/beam/Beam.tsx';
import type { BeamProps } from '../../src/beam/beam-record.ts';

const stamps = [0, 0.1, 0.2, 0.2, 0.9, 0.5];
const record: BeamProps = {
  label: 'Record of gust-1', stamps, count: 6, unit: 's', weights: [0.05, 0.1, 0.1, 0.35, 0.2, -0.1], rule: 'trapezoid',
  marks: { gaps: [3], duplicates: [3], restarts: [5] }, split: ['train', 'train', 'train', 'guard', 'test', 'test'], records: [{ label: 'gust-1', from: 0, count: 6 }],
};

describe('the beam', () => {
  it('is read with the arrow keys, one snapshot after the other, in a live line', async () => {
    const keys = userEvent.setup();
    render(<Beam {...record} />);
    const slider = screen.getByRole('slider', { name: /Record of gust-1/ });
    act(() => slider.focus());
    await keys.keyboard('{ArrowRight}');
    const live = document.querySelector('[aria-live="polite"]')!;
    expect(live).toHaveTextContent('Snapshot 0 of 6, time 0 s, weight 0.05 (trapezoid), training');
    await keys.keyboard('{ArrowRight}{ArrowRight}{ArrowRight}');
    expect(live).toHaveTextContent('Snapshot 3 of 6');
    expect(live).toHaveTextContent('repeated stamp, a gap follows');
    expect(slider).toHaveAttribute('aria-valuenow', '3');
    expect(slider.getAttribute('aria-valuetext')).toBe(live.textContent);
    await keys.keyboard('{End}{ArrowRight}');
    expect(live).toHaveTextContent('Snapshot 5 of 6');
    expect(live).toHaveTextContent('first after a restart');
    await keys.keyboard('{Home}{ArrowLeft}');
    expect(live).toHaveTextContent('Snapshot 0 of 6');
  });

  it('chooses the snapshot that was read, and says nothing of selection to a page that did not ask', async () => {
    const keys = userEvent.setup();
    const onSelect = vi.fn();
    render(<Beam {...record} onSelect={onSelect} />);
    act(() => screen.getByRole('slider').focus());
    await keys.keyboard('{ArrowRight}{ArrowRight}{Enter}');
    expect(onSelect).toHaveBeenCalledExactlyOnceWith(1);
  });

  it('tells a window in time, not in positions, and forgets it on the key 0', async () => {
    const keys = userEvent.setup();
    const onWindow = vi.fn();
    render(<Beam {...record} onWindow={onWindow} />);
    act(() => screen.getByRole('slider').focus());
    await keys.keyboard('{Home}+');
    const window = onWindow.mock.lastCall![0] as { from: number; to: number };
    expect(window.from).toBeCloseTo(0, 12);
    expect(window.to).toBeCloseTo(0.45, 12);
    await keys.keyboard('0');
    expect(onWindow).toHaveBeenLastCalledWith(null);
  });

  it('has a table with the same snapshots as its twin', async () => {
    const keys = userEvent.setup();
    render(<Beam {...record} second={{ label: 'equal', weights: [1, 1, 1, 1, 1, 1] }} />);
    await keys.click(screen.getByText('As a table'));
    const table = await screen.findByRole('table');
    expect(table).toHaveAttribute('aria-rowcount', '7');
    const rows = within(table).getAllByRole('row');
    expect(rows.map((row) => within(row).queryAllByRole('cell').map((cell) => cell.textContent))).toContainEqual(['3', '0.2', '0.35', '1', 'left out between parts', 'repeated stamp, a gap follows']);
  });

  it('offers no time scale where there is no time, and names what is missing when it is empty', () => {
    const { rerender } = render(<Beam {...record} stamps={null} split={null} />);
    expect(screen.queryByRole('radio', { name: 'logarithmic' })).toBeNull();
    rerender(<Beam {...record} stamps={[]} weights={[]} split={null} count={0} records={[]} />);
    expect(screen.getByText(/no snapshot/)).toBeInTheDocument();
  });
});
