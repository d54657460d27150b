/** Singular values on a logarithmic axis with the rounding floor, and the cumulative energy. Below the floor marks are hollow, without digits. */
import { useMemo, useRef, useState } from 'react';
import { decadeTicks } from '../components/axis-ticks.ts';
import { Button } from '../components/Button.tsx';
import { csvText } from '../components/csv.ts';
import { percentText, quantityText } from '../components/number-format.ts';
import { saveFile } from '../components/save-file.ts';
import { useWidth } from '../components/use-drawing.ts';
import { pathOf } from './line-thinning.ts';
import { savePng, saveSvg } from './save-plot.ts';
import { decadeSpan, spectrumRows } from './spectrum-figures.ts';
import { SpectrumTable } from './SpectrumTable.tsx';
import { useReadingCursor } from './use-reading-cursor.ts';

interface Props {
  singularValues: number[];
  floor: number;
  /** energy share -> rank that reaches it */
  rank: Record<string, number>;
  fileName: string;
}

const height = 300;
const edge = { left: 60, right: 58, top: 14, bottom: 40 };

export default function SpectrumPlot({ singularValues, floor, rank, fileName }: Props) {
  const { box, width } = useWidth<HTMLDivElement>();
  const svg = useRef<SVGSVGElement>(null);
  const [tableOpen, setTableOpen] = useState(false);
  const rows = useMemo(() => spectrumRows(singularValues, floor), [singularValues, floor]);
  const [low, high] = decadeSpan(rows, floor);
  const count = rows.length;
  const plotted = height - edge.top - edge.bottom;
  const inner = Math.max(1, width - edge.left - edge.right);
  const sx = (k: number) => edge.left + (count > 1 ? (k / (count - 1)) * inner : inner / 2);
  const sy = (sigma: number) => edge.top + (1 - (Math.max(Math.log10(sigma), low) - low) / (high - low)) * plotted;
  const se = (share: number) => edge.top + (1 - share) * plotted;
  const words = (k: number) => (rows[k].noise ? `rank ${k + 1}: below the rounding floor, only noise` : `rank ${k + 1}: singular value ${quantityText(rows[k].sigma)}, ${percentText(rows[k].energy, 4)} of the energy up to here`);
  const { cursor, setCursor, slider } = useReadingCursor(count, `Spectrum of ${count} singular values`, words);
  const radius = inner / count < 5 ? 2 : 3.2;
  const csv = () => saveFile(`${fileName}.csv`, csvText([['rank', 'singular_value', 'cumulative_energy'], ...rows.map((row) => (row.noise ? [row.rank, null, null] : [row.rank, row.sigma, row.energy]))]), 'text/csv;charset=utf-8');
  const marks = useMemo(
    () => rows.map((row, k) => (row.sigma > 0 ? <circle key={row.rank} cx={sx(k)} cy={sy(row.sigma)} r={radius} fill={row.noise ? 'none' : 'var(--ink)'} stroke={row.noise ? 'var(--rule-strong)' : 'var(--ink)'} /> : null)),
    // what sx and sy depend on
    // eslint-disable-next-line react-hooks/exhaustive-deps
    [rows, width, radius, low, high],
  );
  return (
    <figure className="min-w-0 space-y-2">
      <div ref={box} {...slider} className="min-w-0 touch-pan-y overflow-hidden border-y border-rule bg-paper-raised" style={{ minHeight: height }}>
        {width > 0 && (
          <svg ref={svg} aria-hidden width={width} height={height} className="block" fontFamily="'Commissioner Variable', sans-serif" fontSize="12"
            onPointerMove={(event) => count > 0 && setCursor(Math.min(count - 1, Math.max(0, Math.round(((event.clientX - event.currentTarget.getBoundingClientRect().left - edge.left) / inner) * (count - 1)))))}
            onPointerLeave={() => setCursor(null)}>
            {decadeTicks(10 ** low, 10 ** high, 8).map((exponent) => (
              <g key={exponent}>
                <line x1={edge.left} x2={width - edge.right} y1={sy(10 ** exponent)} y2={sy(10 ** exponent)} stroke="var(--rule)" />
                <text x={edge.left - 8} y={sy(10 ** exponent) + 4} textAnchor="end" fill="var(--ink-soft)">1e{exponent}</text>
              </g>
            ))}
            {[0, 0.5, 1].map((share) => <text key={share} x={width - edge.right + 8} y={se(share) + 4} fill="var(--verdigris)">{share * 100} %</text>)}
            <path d={pathOf(rows.map((row, k) => [sx(k), se(row.energy)]))} fill="none" stroke="var(--verdigris)" strokeWidth="1.5" />
            {floor > 0 && (
              <>
                <line x1={edge.left} x2={width - edge.right} y1={sy(floor)} y2={sy(floor)} stroke="var(--oxide)" strokeDasharray="6 4" />
                <text x={width - edge.right - 4} y={sy(floor) - 6} textAnchor="end" fill="var(--oxide)">rounding floor</text>
              </>
            )}
            {Object.entries(rank).filter(([, r]) => r >= 1 && r <= count).map(([share, r]) => (
              <path key={share} d={`M${sx(r - 1)} ${height - edge.bottom}v-9M${sx(r - 1) - 3} ${height - edge.bottom - 5}l3 5l3 -5`} fill="none" stroke="var(--verdigris)" strokeWidth="1.5" />
            ))}
            {marks}
            {cursor !== null && <line x1={sx(cursor)} x2={sx(cursor)} y1={edge.top} y2={height - edge.bottom} stroke="var(--brass)" strokeWidth="1.5" />}
            <line x1={edge.left} x2={width - edge.right} y1={height - edge.bottom} y2={height - edge.bottom} stroke="var(--rule-strong)" />
            <text x={edge.left} y={height - edge.bottom + 18} fill="var(--ink-soft)">1</text>
            <text x={edge.left + inner / 2} y={height - edge.bottom + 18} textAnchor="middle" fill="var(--ink-soft)">rank</text>
            <text x={width - edge.right} y={height - edge.bottom + 18} textAnchor="end" fill="var(--ink-soft)">{count}</text>
            <text x={edge.left} y={height - 6} fill="var(--ink-soft)">{inner > 380 ? 'left: singular value' : 'singular value'}</text>
            <text x={width - edge.right} y={height - 6} textAnchor="end" fill="var(--verdigris)">{inner > 380 ? 'right: energy up to the rank' : 'energy'}</text>
          </svg>
        )}
      </div>
      <p aria-live="polite" className="min-h-6 text-sm tabular-nums">{cursor === null ? <span className="text-ink-soft">{Object.entries(rank).map(([share, r]) => `${percentText(Number(share), 2)} of the energy at rank ${r}`).join('; ')}.</span> : words(cursor)}</p>
      <div data-no-print className="flex flex-wrap items-center gap-x-3 text-sm">
        <span className="text-ink-soft">Save as</span>
        <Button kind="quiet" onPress={() => { if (svg.current) saveSvg(svg.current, fileName); }}>SVG</Button>
        <Button kind="quiet" onPress={() => { if (svg.current) void savePng(svg.current, fileName); }}>PNG</Button>
        <Button kind="quiet" onPress={csv}>CSV</Button>
      </div>
      <details data-no-print onToggle={(event) => setTableOpen(event.currentTarget.open)} className="text-sm">
        <summary className="text-ink-soft">As a table</summary>
        {tableOpen && <SpectrumTable rows={rows} />}
      </details>
    </figure>
  );
}
