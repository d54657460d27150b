/** Singular values on a log axis with the rounding floor, and the cumulative energy; below the floor marks are hollow and have no digits. */
import { useMemo, useRef, useState } from 'react';
import { useWidth } from '../beam/use-canvas.ts';
import { Button } from '../components/Button.tsx';
import { csvText, download } from '../components/csv.ts';
import { percentText, quantityText } from '../components/number-format.ts';

interface Props {
  singularValues: number[];
  floor: number;
  rank: Record<string, number>;
  /** sum of the squares of all singular values; made from them when left out */
  fileName: string;
}

const height = 280, left = 64, right = 52, top = 12, bottom = 36;

export default function SpectrumPlot({ singularValues, floor, rank, fileName }: Props) {
  const { box, width } = useWidth<HTMLDivElement>();
  const svg = useRef<SVGSVGElement>(null);
  const [at, setAt] = useState<number | null>(null);
  const total = useMemo(() => singularValues.reduce((sum, sigma) => sum + sigma * sigma, 0), [singularValues]);
  const cumulative = useMemo(() => {
    let sum = 0;
    return singularValues.map((sigma) => (sum += sigma * sigma) / total);
  }, [singularValues, total]);
  const m = singularValues.length, first = singularValues[0] ?? 1;
  const low = Math.floor(Math.log10(Math.max(Math.min(floor, ...singularValues.filter((sigma) => sigma > 0)), first * 1e-17))), high = Math.ceil(Math.log10(first));
  const inner = Math.max(1, width - left - right);
  const sx = (k: number) => left + (m > 1 ? (k / (m - 1)) * inner : inner / 2);
  const sy = (value: number) => top + (1 - (Math.max(Math.log10(value), low) - low) / Math.max(1, high - low)) * (height - top - bottom);
  const se = (share: number) => top + (1 - share) * (height - top - bottom);
  const decades = Array.from({ length: high - low + 1 }, (_, i) => low + i).filter((_, i, all) => all.length <= 9 || i % Math.ceil(all.length / 8) === 0);
  const words = (k: number) => (singularValues[k]! > floor ? `sigma ${k + 1} = ${quantityText(singularValues[k]!)}, ${percentText(Math.min(1, cumulative[k]!))} of the energy up to here` : `sigma ${k + 1} lies below the rounding floor: noise`);
  const save = (kind: 'svg' | 'png') => {
    if (!svg.current) return;
    const copy = svg.current.cloneNode(true) as SVGSVGElement, style = getComputedStyle(document.documentElement);
    copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg');
    const text = new XMLSerializer().serializeToString(copy).replace(/var\(--([a-z-]+)\)/g, (_, name: string) => style.getPropertyValue(`--${name}`).trim());
    if (kind === 'svg') return download(`${fileName}.svg`, 'image/svg+xml', text);
    const image = new Image();
    image.onload = () => {
      const canvas = document.createElement('canvas');
      canvas.width = 2 * width;
      canvas.height = 2 * height;
      const context = canvas.getContext('2d')!;
      context.fillStyle = style.getPropertyValue('--sheet');
      context.fillRect(0, 0, canvas.width, canvas.height);
      context.drawImage(image, 0, 0, canvas.width, canvas.height);
      canvas.toBlob((blob) => blob && download(`${fileName}.png`, 'image/png', blob));
    };
    image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(text)}`;
  };
  const csv = () => download(`${fileName}.csv`, 'text/csv', csvText(['rank', 'singular_value', 'cumulative_energy'], singularValues.map((sigma, k) => (sigma > floor ? [k + 1, sigma, Math.min(1, cumulative[k]!)] : [k + 1, '', '']))));
  return (
    <figure className="border-y border-rule-strong bg-sheet p-3">
      <div ref={box}>
        <svg ref={svg} role="img" aria-label={`Spectrum of ${m} singular values; the floor is at ${quantityText(floor, 3)}`} width={width} height={height} className="block" fontFamily="Commissioner Variable, sans-serif"
          onPointerMove={(event) => setAt(Math.min(m - 1, Math.max(0, Math.round(((event.nativeEvent.offsetX - left) / inner) * (m - 1)))))} onPointerLeave={() => setAt(null)}>
          {decades.map((decade) => <g key={decade}><line x1={left} x2={width - right} y1={sy(10 ** decade)} y2={sy(10 ** decade)} stroke="var(--rule)" /><text x={left - 8} y={sy(10 ** decade) + 4} textAnchor="end" fontSize="11" fill="var(--ink-soft)">1e{decade}</text></g>)}
          {[0, 0.5, 1].map((share) => <text key={share} x={width - right + 8} y={se(share) + 4} fontSize="11" fill="var(--verdigris)">{share * 100} %</text>)}
          <line x1={left} x2={width - right} y1={sy(floor)} y2={sy(floor)} stroke="var(--oxide)" strokeDasharray="6 4" />
          <text x={width - right - 4} y={sy(floor) - 5} textAnchor="end" fontSize="11" fill="var(--oxide)">rounding floor</text>
          <path d={`M${cumulative.map((share, k) => `${sx(k).toFixed(1)} ${se(Math.min(1, share)).toFixed(1)}`).join('L')}`} fill="none" stroke="var(--verdigris)" strokeWidth="1.5" />
          {singularValues.map((sigma, k) => (sigma > 0 ? <circle key={k} cx={sx(k)} cy={sy(sigma)} r={m > 200 ? 2 : 3} fill={sigma > floor ? 'var(--brass-deep)' : 'none'} stroke={sigma > floor ? 'var(--brass-deep)' : 'var(--rule-strong)'} /> : null))}
          {at !== null && <line x1={sx(at)} x2={sx(at)} y1={top} y2={height - bottom} stroke="var(--ink)" strokeWidth="1" />}
          <text x={left} y={height - 8} fontSize="11" fill="var(--ink-soft)">rank 1</text>
          <text x={width - right} y={height - 8} fontSize="11" textAnchor="end" fill="var(--ink-soft)">{m}</text>
        </svg>
      </div>
      <p aria-live="polite" className="min-h-6 text-sm tabular-nums">{at !== null && m > 0 ? words(at) : <span className="text-ink-soft">Dots: singular values. Line: cumulative energy. {Object.entries(rank).map(([level, r]) => `${percentText(Number(level))} at rank ${r}`).join(', ')}.</span>}</p>
      <div className="flex flex-wrap gap-x-3">
        <Button kind="quiet" onPress={() => save('svg')}>SVG</Button><Button kind="quiet" onPress={() => save('png')}>PNG</Button><Button kind="quiet" onPress={csv}>CSV</Button>
      </div>
      <details className="text-sm">
        <summary className="cursor-pointer text-ink-soft">As a table</summary>
        <div tabIndex={0} role="region" aria-label="Singular values as a table" className="mt-2 max-h-72 max-w-lg overflow-auto border border-rule">
          <table className="w-full text-right tabular-nums [&_td]:px-3 [&_td]:py-0.5 [&_th]:px-3">
            <thead><tr><th className="font-medium">Rank</th><th className="font-medium">Singular value</th><th className="font-medium">Energy up to here</th></tr></thead>
            <tbody>{singularValues.slice(0, 500).map((sigma, k) => <tr key={k}><td>{k + 1}</td><td>{sigma > floor ? quantityText(sigma) : 'below the floor'}</td><td>{sigma > floor ? percentText(Math.min(1, cumulative[k]!)) : ''}</td></tr>)}</tbody>
          </table>
        </div>
      </details>
    </figure>
  );
}
