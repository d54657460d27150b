/** The spectrum as a table; no digits where there is only noise. */
import { percentText, quantityText } from '../components/number-format.ts';
import type { SpectrumRow } from './spectrum-figures.ts';

export function SpectrumTable({ rows }: { rows: SpectrumRow[] }) {
  return (
    <div tabIndex={0} role="region" aria-label="Singular values as a table" className="mt-2 max-h-80 max-w-xl overflow-auto border-y border-rule -outline-offset-2">
      <table className="w-full border-separate border-spacing-0 text-right tabular-nums">
        <thead>
          <tr>{['Rank', 'Singular value', 'Energy up to here'].map((head) => <th key={head} scope="col" className="sticky top-0 border-b border-rule-strong bg-paper px-3 py-1.5 font-medium">{head}</th>)}</tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.rank} className="[&>td]:border-b [&>td]:border-rule [&>td]:px-3 [&>td]:py-1">
              <td>{row.rank}</td>
              <td title={row.noise ? undefined : String(row.sigma)}>{row.noise ? <span className="text-ink-soft">below the floor</span> : quantityText(row.sigma)}</td>
              <td>{row.noise ? '' : percentText(row.energy, 4)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
