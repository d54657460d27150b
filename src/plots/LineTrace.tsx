/** A quantity along an axis as a line; broken where there is no value. The axis may step back (a restarted record). */
import { useMemo } from 'react';
import { linearTicks } from '../components/axis-ticks.ts';
import { quantityText } from '../components/number-format.ts';
import { useWidth } from '../components/use-drawing.ts';
import { pathOf, thinLine, type Point } from './line-thinning.ts';
import { useReadingCursor } from './use-reading-cursor.ts';

interface Props {
  label: string;
  unit: string | null;
  /** null: the order is drawn */
  x: number[] | null;
  xUnit: string | null;
  xName?: string;
  y: (number | null)[];
}

const height = 156;
const edge = { left: 68, right: 12, top: 10, bottom: 28 };

export default function LineTrace({ label, unit, x, xUnit, xName = x ? 'time' : 'index', y }: Props) {
  const { box, width } = useWidth<HTMLDivElement>();
  const inner = Math.max(1, width - edge.left - edge.right);
  const { sx, sy, path, dots, xTicks, yTicks } = useMemo(() => {
    const place = (j: number) => x?.[j] ?? j;
    let [xMin, xMax, yMin, yMax] = [Infinity, -Infinity, Infinity, -Infinity];
    for (let j = 0; j < y.length; j += 1) {
      xMin = Math.min(xMin, place(j));
      xMax = Math.max(xMax, place(j));
      const value = y[j];
      if (value === null) continue;
      yMin = Math.min(yMin, value);
      yMax = Math.max(yMax, value);
    }
    if (!(yMax > yMin)) [yMin, yMax] = Number.isFinite(yMin) ? [yMin - Math.max(0.5, Math.abs(yMin) / 2), yMin + Math.max(0.5, Math.abs(yMin) / 2)] : [0, 1];
    const toX = (j: number) => edge.left + (xMax > xMin ? (place(j) - xMin) / (xMax - xMin) : 0.5) * inner;
    const toXValue = (value: number) => edge.left + (xMax > xMin ? (value - xMin) / (xMax - xMin) : 0.5) * inner;
    const toY = (value: number) => edge.top + (1 - (value - yMin) / (yMax - yMin)) * (height - edge.top - edge.bottom);
    const pieces: Point[][] = [[]];
    y.forEach((value, j) => {
      if (value === null) pieces.push([]);
      else pieces[pieces.length - 1].push([toX(j), toY(value)]);
    });
    return {
      sx: toX, sy: toY,
      path: pieces.filter((piece) => piece.length > 1).map((piece) => pathOf(thinLine(piece, inner))).join(''),
      dots: pieces.filter((piece) => piece.length === 1).map((piece) => piece[0]),
      xTicks: linearTicks(xMin, xMax, Math.max(2, inner / 110)).map((value) => [value, toXValue(value)] as const),
      yTicks: linearTicks(yMin, yMax, 5).map((value) => [value, toY(value)] as const),
    };
  }, [x, y, inner]);
  const words = (j: number) => `${xName} ${quantityText(x?.[j] ?? j, 8)}${x && xUnit ? ` ${xUnit}` : ''}: ${y[j] === null ? 'no finite value' : `${quantityText(y[j])}${unit ? ` ${unit}` : ''}`}`;
  const { cursor, setCursor, slider } = useReadingCursor(y.length, `${label} over ${xName}`, words);
  const nearest = (px: number) => {
    let best = 0;
    for (let j = 1; j < y.length; j += 1) if (Math.abs(sx(j) - px) < Math.abs(sx(best) - px)) best = j;
    return best;
  };
  const marked = cursor === null ? null : y[cursor];
  return (
    <figure className="min-w-0">
      <figcaption className="flex flex-wrap justify-between gap-x-6 text-sm">
        <span className="font-medium">{label}{unit && <span className="font-normal text-ink-soft"> in {unit}</span>}</span>
        <span aria-live="polite" className="text-ink-soft tabular-nums">{cursor === null ? '' : words(cursor)}</span>
      </figcaption>
      <div ref={box} {...slider} className="mt-1 touch-pan-y" style={{ minHeight: height }}>
        {width > 0 && (
          <svg aria-hidden width={width} height={height} className="block overflow-visible"
            onPointerMove={(event) => y.length > 0 && setCursor(nearest(event.clientX - event.currentTarget.getBoundingClientRect().left))} onPointerLeave={() => setCursor(null)}>
            {yTicks.map(([value, at]) => (
              <g key={value}>
                <line x1={edge.left} x2={width - edge.right} y1={at} y2={at} stroke="var(--rule)" />
                <text x={edge.left - 8} y={at + 4} textAnchor="end" fontSize="12" fill="var(--ink-soft)">{quantityText(value, 4)}</text>
              </g>
            ))}
            {xTicks.map(([value, at]) => (
              <g key={value}>
                <line x1={at} x2={at} y1={height - edge.bottom} y2={height - edge.bottom + 4} stroke="var(--rule-strong)" />
                <text x={Math.min(at, width - 18)} y={height - 8} textAnchor="middle" fontSize="12" fill="var(--ink-soft)">{quantityText(value, 5)}</text>
              </g>
            ))}
            <line x1={edge.left} x2={width - edge.right} y1={height - edge.bottom} y2={height - edge.bottom} stroke="var(--rule-strong)" />
            <path d={path} fill="none" stroke="var(--ink)" strokeWidth="1.5" strokeLinejoin="round" />
            {dots.map(([px, py]) => <circle key={px} cx={px} cy={py} r="2" fill="var(--ink)" />)}
            {cursor !== null && marked !== null && marked !== undefined && <circle cx={sx(cursor)} cy={sy(marked)} r="4" fill="var(--brass)" />}
          </svg>
        )}
      </div>
    </figure>
  );
}
