/** Values on a two-dimensional grid as an image; the y axis points up; what is not finite is hatched. */
import { useMemo, useState } from 'react';
import type { FieldValues } from '#contract/shape.ts';
import { useCanvas, useWidth } from '../beam/use-canvas.ts';
import { readInk } from '../beam/ink.ts';
import { quantityText } from '../components/number-format.ts';
import { colourIndex, colourMaps, type ColourScale } from './colour-map.ts';
import { aspectOf, cellAt, cellBorders } from './field-geometry.ts';

type Axis = FieldValues['axes'][number];

interface Props {
  label: string;
  unit: string | null;
  x: Axis;
  y: Axis;
  /** y.count x x.count, x fastest */
  values: (number | null)[];
  scale: ColourScale;
  range: [number, number];
}

const widest = 920;

export function FieldImage({ label, unit, x, y, values, scale, range }: Props) {
  const { box, width: room } = useWidth<HTMLDivElement>();
  const [cell, setCell] = useState<[number, number] | null>(null);
  const width = Math.min(room, widest);
  const height = Math.max(40, Math.round(width * aspectOf(x, y)));
  const xBorders = useMemo(() => cellBorders(x.nodes, x.count), [x]);
  const yBorders = useMemo(() => cellBorders(y.nodes, y.count), [y]);
  const canvas = useCanvas(width, height, (context) => {
    const table = colourMaps[scale], ink = readInk();
    const ratio = window.devicePixelRatio || 1, w = Math.round(width * ratio), h = Math.round(height * ratio);
    if (w < 1 || h < 1) return;
    const image = context.createImageData(w, h), columns = Int32Array.from({ length: w }, (_, p) => cellAt(xBorders, (p + 0.5) / w));
    const missing = parseInt(ink.strong.slice(1), 16) || 0;
    for (let row = 0; row < h; row++) {
      const j = cellAt(yBorders, 1 - (row + 0.5) / h);
      for (let p = 0; p < w; p++) {
        const value = values[j * x.count + columns[p]!], at = 4 * (row * w + p);
        if (value === null || value === undefined) {
          image.data[at + 3] = (row + p) % 8 < 2 ? 255 : 0;
          image.data.set([missing >> 16, (missing >> 8) & 255, missing & 255], at);
        } else {
          const k = 3 * colourIndex(value, range);
          image.data[at] = table[k]!;
          image.data[at + 1] = table[k + 1]!;
          image.data[at + 2] = table[k + 2]!;
          image.data[at + 3] = 255;
        }
      }
    }
    context.putImageData(image, 0, 0);
  }, [values, scale, range[0], range[1], xBorders, yBorders]);
  const place = (axis: Axis, i: number) => `${axis.name} = ${axis.nodes ? quantityText(axis.nodes[i]!) : i}${axis.nodes && axis.unit ? ` ${axis.unit}` : ''}`;
  const words = cell ? `${place(x, cell[0])}, ${place(y, cell[1])}: ${values[cell[1] * x.count + cell[0]] === null ? 'not finite' : `${quantityText(values[cell[1] * x.count + cell[0]]!)}${unit ? ` ${unit}` : ''}`}` : null;
  const moved = ([i, j]: [number, number], dx: number, dy: number): [number, number] => [Math.min(x.count - 1, Math.max(0, i + dx)), Math.min(y.count - 1, Math.max(0, j + dy))];
  return (
    <div ref={box} className="w-full">
      <div
        role="application" tabIndex={0} aria-roledescription="field" aria-label={`${label} over ${x.name} and ${y.name}; arrow keys read values`}
        className="relative w-fit border border-rule-strong"
        onPointerMove={(event) => setCell([cellAt(xBorders, event.nativeEvent.offsetX / width), cellAt(yBorders, 1 - event.nativeEvent.offsetY / height)])}
        onPointerLeave={() => setCell(null)}
        onKeyDown={(event) => {
          const step = ({ ArrowRight: [1, 0], ArrowLeft: [-1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] } as Record<string, [number, number]>)[event.key];
          if (!step) return;
          event.preventDefault();
          setCell((now) => (now ? moved(now, ...step) : [Math.floor(x.count / 2), Math.floor(y.count / 2)]));
        }}
      >
        <canvas ref={canvas} aria-hidden style={{ width, height }} className="block" />
      </div>
      <p aria-live="polite" className="mt-1 min-h-6 text-sm tabular-nums">{words ?? <span className="text-ink-soft">{x.name} to the right, {y.name} upwards{x.unit ? ` (${x.unit})` : ''}. Point at the field to read values.</span>}</p>
    </div>
  );
}
