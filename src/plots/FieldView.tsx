/** A snapshot, mode or mean: a line in one dimension, an image in two, a slice in three; with colour bar and values under the pointer. */
import { useState } from 'react';
import type { FieldValues } from '#contract/shape.ts';
import { quantityText } from '../components/number-format.ts';
import { Select } from '../components/Select.tsx';
import { ColourBar } from './ColourBar.tsx';
import { FieldImage } from './FieldImage.tsx';
import { FramePlayer } from './FramePlayer.tsx';
import LineTrace from './LineTrace.tsx';
import { colourRange, type ColourScale } from './colour-map.ts';
import { sliceOf } from './field-slice.ts';

interface Props {
  data: FieldValues;
  scale: ColourScale;
  onIndex: (index: number) => void;
  isFetching: boolean;
}

export default function FieldView({ data, scale, onIndex, isFetching }: Props) {
  const long = data.axes.map((axis, i) => ({ axis, i })).filter(({ axis }) => axis.count > 1);
  const [across, setAcross] = useState<number | null>(null);
  const [layer, setLayer] = useState(0);
  // Axis that is cut: of more than two, the shortest unless chosen otherwise.
  const cut = long.length > 2 ? (long.find(({ i }) => i === across) ?? long.reduce((least, each) => (each.axis.count < least.axis.count ? each : least))) : null;
  const shown = Math.min(layer, (cut?.axis.count ?? 1) - 1);
  const slice = sliceOf(data, cut && { axis: cut.i, index: shown });
  const range = colourRange(scale, data.min, data.max);
  const thinned = data.stride.some((stride) => stride > 1);
  return (
    <figure className="min-w-0 space-y-3" aria-busy={isFetching}>
      <figcaption className="flex flex-wrap justify-between gap-x-6 text-sm">
        <span className="font-medium">{data.label}{data.time !== null && <span className="font-normal text-ink-soft">, time {quantityText(data.time, 8)}</span>}</span>
        <span className="text-ink-soft tabular-nums">
          {data.min !== null && data.max !== null ? `${quantityText(data.min)} to ${quantityText(data.max)}${data.unit ? ` ${data.unit}` : ''}` : 'no finite value'}
          {thinned && `; drawn from every ${data.stride.join(' x ')} node`}
        </span>
      </figcaption>
      {cut && (
        <div className="flex flex-wrap items-end gap-4">
          <Select label="Slice across" value={String(cut.i)} options={long.map(({ axis, i }) => ({ id: String(i), label: axis.name }))} onChange={(id) => { setAcross(Number(id)); setLayer(0); }} />
          <label className="flex min-h-11 min-w-56 flex-1 items-center gap-3 text-sm">
            <span className="whitespace-nowrap tabular-nums">{cut.axis.name} {cut.axis.nodes ? `${quantityText(cut.axis.nodes[shown])}${cut.axis.unit ? ` ${cut.axis.unit}` : ''}` : `node ${shown}`}</span>
            <input aria-label={`Layer along ${cut.axis.name}`} type="range" className="h-6 min-w-0 flex-1 accent-(--brass)" min={0} max={cut.axis.count - 1} value={shown} onChange={(event) => setLayer(Number(event.target.value))} />
          </label>
        </div>
      )}
      {slice.y === null ? (
        <LineTrace label={data.field} unit={data.unit} x={slice.x.nodes} xUnit={slice.x.unit} xName={slice.x.name} y={slice.values} />
      ) : (
        <>
          <FieldImage label={data.label} unit={data.unit} x={slice.x} y={slice.y} values={slice.values} scale={scale} range={range} />
          <ColourBar scale={scale} range={range} unit={data.unit} />
        </>
      )}
      {data.count > 1 && <FramePlayer index={data.index} count={data.count} onIndex={onIndex} isFetching={isFetching} />}
    </figure>
  );
}
