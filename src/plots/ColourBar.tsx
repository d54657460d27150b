/** The colour map with its range and unit. */
import { quantityText } from '../components/number-format.ts';
import { colourMaps, type ColourScale } from './colour-map.ts';

export function ColourBar({ scale, range, unit }: { scale: ColourScale; range: [number, number]; unit: string | null }) {
  const table = colourMaps[scale];
  const stops = Array.from({ length: 17 }, (_, i) => {
    const k = Math.round((i / 16) * 255) * 3;
    return `rgb(${table[k]} ${table[k + 1]} ${table[k + 2]})`;
  });
  const middle = (range[0] + range[1]) / 2;
  return (
    <div className="max-w-md">
      <div aria-hidden className="h-3 border border-rule-strong" style={{ background: `linear-gradient(90deg, ${stops.join(', ')})` }} />
      <div className="flex justify-between text-xs text-ink-soft tabular-nums">
        <span>{quantityText(range[0], 4)}</span><span>{quantityText(Math.abs(middle) < 1e-12 * (range[1] - range[0]) ? 0 : middle, 4)}</span><span>{quantityText(range[1], 4)}{unit ? ` ${unit}` : ''}</span>
      </div>
    </div>
  );
}
