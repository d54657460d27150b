/** Values on a two-dimensional grid as an image with the grid's own proportions; the value under the pointer or cursor is said beneath. */
import { useCallback, useMemo, useState } from 'react';
import type { FieldValues } from '#contract/shape.ts';
import { quantityText } from '../components/number-format.ts';
import { useDrawing, useWidth, type Palette } from '../components/use-drawing.ts';
import type { ColourScale } from './colour-map.ts';
import { drawField } from './draw-field.ts';
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
const tallest = 560;
const steps: Record<string, [number, number]> = { ArrowRight: [1, 0], ArrowLeft: [-1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] };

export function FieldImage({ label, unit, x, y, values, scale, range }: Props) {
  const { box, width: room } = useWidth<HTMLDivElement>();
  const [cell, setCell] = useState<[number, number] | null>(null);
  const aspect = aspectOf(x, y);
  const width = Math.floor(Math.min(room - 2, widest, tallest / aspect));
  const height = Math.max(24, Math.round(width * aspect));
  const xBorders = useMemo(() => cellBorders(x.nodes, x.count), [x.nodes, x.count]);
  const yBorders = useMemo(() => cellBorders(y.nodes, y.count), [y.nodes, y.count]);
  const [low, high] = range;
  const draw = useCallback(
    (context: CanvasRenderingContext2D, _width: number, _height: number, palette: Palette) => drawField(context, palette['rule-strong'], { values, columns: x.count, xBorders, yBorders, scale, range: [low, high] }),
    [values, x.count, xBorders, yBorders, scale, low, high],
  );
  const canvas = useDrawing(width, height, draw);
  const place = (axis: Axis, i: number) => `${axis.name} ${axis.nodes ? `${quantityText(axis.nodes[i])}${axis.unit ? ` ${axis.unit}` : ''}` : `node ${i}`}`;
  const value = cell ? values[cell[1] * x.count + cell[0]] : null;
  const words = cell ? `${place(x, cell[0])}, ${place(y, cell[1])}: ${value === null || value === undefined ? 'not finite' : `${quantityText(value)}${unit ? ` ${unit}` : ''}`}` : null;
  const read = (event: React.PointerEvent) => {
    const edges = event.currentTarget.getBoundingClientRect();
    setCell([cellAt(xBorders, (event.clientX - edges.left) / edges.width), cellAt(yBorders, 1 - (event.clientY - edges.top) / edges.height)]);
  };
  return (
    <div ref={box} className="w-full min-w-0">
      <div
        role="application" tabIndex={0} aria-roledescription="field" aria-label={`${label} over ${x.name} and ${y.name}; arrow keys read values`}
        className="w-fit cursor-crosshair touch-pan-y border border-rule-strong"
        onKeyDown={(event) => {
          const step = steps[event.key];
          if (!step) return;
          event.preventDefault();
          const [i, j] = cell ?? [Math.floor(x.count / 2), Math.floor(y.count / 2)];
          setCell([Math.min(x.count - 1, Math.max(0, i + step[0])), Math.min(y.count - 1, Math.max(0, j + step[1]))]);
        }}
      >
        <canvas ref={canvas} aria-hidden onPointerMove={read} onPointerLeave={() => setCell(null)} style={{ width: Math.max(0, width), height }} className="block" />
      </div>
      <p aria-live="polite" className="mt-1 min-h-6 text-sm tabular-nums">{words ?? <span className="text-ink-soft">{x.name} to the right, {y.name} upwards{x.unit ? `, in ${x.unit}` : ''}. Point at the field, or use the arrow keys, to read values.</span>}</p>
    </div>
  );
}
