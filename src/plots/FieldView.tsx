/** A snapshot or mode: a line in one dimension, an image in two, a slice in three; with colour bar, values under the pointer, and time. */
import { useEffect, useState } from 'react';
import type { FieldValues } from '#contract/shape.ts';
import { Button } from '../components/Button.tsx';
import { quantityText } from '../components/number-format.ts';
import { ColourBar } from './ColourBar.tsx';
import { FieldImage } from './FieldImage.tsx';
import LineTrace from './LineTrace.tsx';
import { colourRange, type ColourScale } from './colour-map.ts';

interface Props {
  data: FieldValues;
  scale: ColourScale;
  onIndex: (index: number) => void;
  isFetching: boolean;
}

export default function FieldView({ data, scale, onIndex, isFetching }: Props) {
  const axes = data.axes.filter((axis) => axis.count > 1 || data.axes.length === 1);
  const [slice, setSlice] = useState(0);
  const range = colourRange(scale, data.min, data.max);
  const thinned = data.stride.some((stride) => stride > 1);
  const depth = axes.length >= 3 ? axes.slice(0, -2).reduce((n, axis) => n * axis.count, 1) : 1;
  const plane = axes.length >= 2 ? axes[axes.length - 1]!.count * axes[axes.length - 2]!.count : 0;
  const shown = Math.min(slice, depth - 1);
  return (
    <figure className="space-y-3">
      <figcaption className="flex flex-wrap justify-between gap-x-6 text-sm">
        <span className="font-medium">{data.label}{data.time !== null && `, t = ${quantityText(data.time)}`}</span>
        <span className="text-ink-soft tabular-nums">{data.min !== null && data.max !== null ? `${quantityText(data.min)} to ${quantityText(data.max)}${data.unit ? ` ${data.unit}` : ''}` : 'no finite value'}{thinned && `; drawn from every ${data.stride.join(' x ')} node`}</span>
      </figcaption>
      {axes.length === 1 ? (
        <LineTrace label={data.field} unit={data.unit} x={axes[0]!.nodes} xUnit={axes[0]!.unit} y={data.values} xName={axes[0]!.name} />
      ) : (
        <>
          {depth > 1 && (
            <label className="flex items-center gap-3 text-sm">
              Slice {axes.slice(0, -2).map((axis) => axis.name).join(', ')} {shown + 1} of {depth}
              <input type="range" className="w-64 accent-[var(--brass-deep)]" min={0} max={depth - 1} value={shown} onChange={(event) => setSlice(Number(event.target.value))} />
            </label>
          )}
          <FieldImage label={data.label} unit={data.unit} x={axes[axes.length - 1]!} y={axes[axes.length - 2]!} values={depth > 1 ? data.values.slice(shown * plane, (shown + 1) * plane) : data.values} scale={scale} range={range} />
          <ColourBar scale={scale} range={range} unit={data.unit} />
        </>
      )}
      {data.count > 1 && <Player index={data.index} count={data.count} onIndex={onIndex} isFetching={isFetching} />}
    </figure>
  );
}

/** Slider and play through snapshots or modes; the next one is asked for when the last one has come. */
function Player({ index, count, onIndex, isFetching }: { index: number; count: number; onIndex: (index: number) => void; isFetching: boolean }) {
  const [asked, setAsked] = useState(index);
  const [playing, setPlaying] = useState(false);
  useEffect(() => setAsked(index), [index]);
  useEffect(() => {
    if (!playing || isFetching) return;
    if (index >= count - 1) {
      setPlaying(false);
      return;
    }
    const timer = setTimeout(() => onIndex(index + 1), 120);
    return () => clearTimeout(timer);
  }, [playing, isFetching, index, count, onIndex]);
  const go = (to: number) => {
    setAsked(to);
    onIndex(to);
  };
  return (
    <div className="flex flex-wrap items-center gap-3">
      <Button kind="plain" onPress={() => { if (index >= count - 1) go(0); setPlaying(!playing); }}>{playing ? 'Pause' : 'Play'}</Button>
      <label className="flex min-w-60 flex-1 items-center gap-3 text-sm">
        <span className="tabular-nums">{asked + 1} of {count}</span>
        <input aria-label="Which one is shown" type="range" className="flex-1 accent-[var(--brass-deep)]" min={0} max={count - 1} value={asked} onChange={(event) => go(Number(event.target.value))} />
      </label>
    </div>
  );
}
