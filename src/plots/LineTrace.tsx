/** A quantity along an axis as a line; gaps where there is no value. */
import { useMemo, useState } from 'react';
import { ticksOf } from '../beam/layout.ts';
import { useWidth } from '../beam/use-canvas.ts';
import { quantityText } from '../components/number-format.ts';

interface Props {
  label: string;
  unit: string | null;
  /** null: the order is drawn */
  x: number[] | null;
  xUnit: string | null;
  xName?: string;
  y: (number | null)[];
}

const height = 150, left = 62, bottom = 26, top = 10, right = 12;

/** At most two points a pixel column: the smallest and the largest there. */
export function thin(points: [number, number][], width: number): [number, number][] {
  if (points.length <= 2 * width) return points;
  const columns = new Map<number, { low: [number, number]; high: [number, number] }>();
  for (const point of points) {
    const key = Math.floor(point[0]), known = columns.get(key);
    if (!known) columns.set(key, { low: point, high: point });
    else {
      if (point[1] < known.low[1]) known.low = point;
      if (point[1] > known.high[1]) known.high = point;
    }
  }
  return [...columns.values()].flatMap(({ low, high }) => (low === high ? [low] : [low, high]));
}

export default function LineTrace({ label, unit, x, xUnit, xName = 't', y }: Props) {
  const { box, width } = useWidth<HTMLDivElement>();
  const [at, setAt] = useState<number | null>(null);
  const picture = useMemo(() => {
    const place = (j: number) => x?.[j] ?? j;
    let xMin = Infinity, xMax = -Infinity, yMin = Infinity, yMax = -Infinity;
    y.forEach((value, j) => {
      xMin = Math.min(xMin, place(j));
      xMax = Math.max(xMax, place(j));
      if (value === null) return;
      yMin = Math.min(yMin, value);
      yMax = Math.max(yMax, value);
    });
    if (!(yMax > yMin)) { yMin -= 0.5; yMax += 0.5; }
    const inner = Math.max(1, width - left - right);
    const sx = (value: number) => left + (xMax > xMin ? (value - xMin) / (xMax - xMin) : 0.5) * inner;
    const sy = (value: number) => top + (1 - (value - yMin) / (yMax - yMin)) * (height - top - bottom);
    const pieces: [number, number][][] = [[]];
    y.forEach((value, j) => {
      if (value === null) pieces.push([]);
      else pieces[pieces.length - 1]!.push([sx(place(j)), sy(value)]);
    });
    const path = pieces.filter((piece) => piece.length > 0).map((piece) => `M${thin(piece, inner).map(([a, b]) => `${a.toFixed(1)} ${b.toFixed(1)}`).join('L')}`).join('');
    return { sx, sy, place, path, xTicks: ticksOf(xMin, xMax, Math.max(2, inner / 120)), yTicks: ticksOf(yMin, yMax, 3) };
  }, [x, y, width]);
  const { sx, sy, place } = picture;
  return (
    <figure>
      <figcaption className="flex flex-wrap justify-between text-sm"><span className="font-medium">{label}{unit && <span className="font-normal text-ink-soft"> ({unit})</span>}</span><span aria-live="polite" className="tabular-nums">{at !== null && `${xName} = ${quantityText(place(at))}${xUnit ? ` ${xUnit}` : ''}: ${y[at] === null ? 'none' : quantityText(y[at]!)}`}</span></figcaption>
      <div ref={box}>
        <svg role="img" aria-label={`${label} over ${xName}`} width={width} height={height} className="block"
          onPointerMove={(event) => {
            const px = event.nativeEvent.offsetX;
            let best = 0;
            for (let j = 1; j < y.length; j++) if (Math.abs(sx(place(j)) - px) < Math.abs(sx(place(best)) - px)) best = j;
            setAt(y.length > 0 ? best : null);
          }}
          onPointerLeave={() => setAt(null)}>
          {picture.yTicks.map((tick) => <g key={tick}><line x1={left} x2={width - right} y1={sy(tick)} y2={sy(tick)} stroke="var(--rule)" /><text x={left - 6} y={sy(tick) + 4} textAnchor="end" fontSize="11" fill="var(--ink-soft)">{quantityText(tick, 4)}</text></g>)}
          {picture.xTicks.map((tick) => <text key={tick} x={sx(tick)} y={height - 8} textAnchor="middle" fontSize="11" fill="var(--ink-soft)">{quantityText(tick, 5)}</text>)}
          <line x1={left} x2={width - right} y1={height - bottom} y2={height - bottom} stroke="var(--rule-strong)" />
          <path d={picture.path} fill="none" stroke="var(--brass-deep)" strokeWidth="1.5" strokeLinejoin="round" />
          {at !== null && y[at] !== null && y[at] !== undefined && <circle cx={sx(place(at))} cy={sy(y[at])} r="3.5" fill="var(--ink)" />}
        </svg>
      </div>
    </figure>
  );
}
