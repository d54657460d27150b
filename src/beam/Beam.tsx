/** The beam: one strip for every record. Read it by pointer or arrow keys, zoom it by dragging; the table beneath is its twin. */
import { useCallback, useId, useMemo, useState } from 'react';
import { Button } from '../components/Button.tsx';
import { SegmentedControl } from '../components/SegmentedControl.tsx';
import { useDrawing, useWidth, type Palette } from '../components/use-drawing.ts';
import { axisValueAt, layBeam, positionOf, type AxisScale } from './beam-layout.ts';
import { BeamLegend } from './BeamLegend.tsx';
import { BeamTable } from './BeamTable.tsx';
import type { BeamProps } from './beam-record.ts';
import { beamHeight, drawBeam } from './draw-beam.ts';
import type { View } from './pixel-bins.ts';
import { snapshotWords } from './snapshot-words.ts';
import { useBeamPointer } from './use-beam-pointer.ts';

const scales = [{ id: 'linear', label: 'linear time' }, { id: 'log', label: 'logarithmic' }] as const;

export default function Beam({ stamps, count, unit, weights, rule, marks, split, records, label, second, selected = null, onSelect, window: given, onWindow }: BeamProps) {
  const record = useMemo(() => ({ stamps, count, unit, weights, rule, marks, split, records }), [stamps, count, unit, weights, rule, marks, split, records]);
  const [scale, setScale] = useState<AxisScale>('linear');
  const [ownView, setOwnView] = useState<View | null>(null);
  const [tableOpen, setTableOpen] = useState(false);
  const { box, width } = useWidth<HTMLDivElement>();
  const titleId = useId();
  const layout = useMemo(() => layBeam(record, scale), [record, scale]);
  const only = layout.parts.length === 1 ? layout.parts[0] : null;

  // A window given from outside is the view, where one record stands alone.
  const view = useMemo<View>(() => {
    if (given === undefined || !only) return ownView ?? { from: 0, to: 1 };
    if (given === null) return { from: 0, to: 1 };
    const from = Math.max(0, positionOf(only, scale, given.from));
    const to = Math.min(1, positionOf(only, scale, given.to));
    return to > from ? { from, to } : { from: 0, to: 1 };
  }, [given, only, scale, ownView]);
  const onView = (next: View | null) => {
    setOwnView(next);
    if (onWindow && only) onWindow(next && { from: axisValueAt(only, scale, next.from), to: axisValueAt(only, scale, next.to) });
  };
  const { cursor, brush, zoomed, handlers } = useBeamPointer({ position: layout.position, width, selected, onSelect, view, onView });

  const draw = useCallback(
    (context: CanvasRenderingContext2D, drawn: number, _height: number, palette: Palette) => drawBeam(context, drawn, palette, { record, layout, view, second: second?.weights ?? null, cursor, selected, brush }),
    [record, layout, view, second, cursor, selected, brush],
  );
  const canvas = useDrawing(width, beamHeight, draw);
  const read = cursor ?? selected;
  const words = read !== null && read < count ? snapshotWords(record, read, second) : '';
  if (count === 0) return <p className="text-ink-soft">{label}: no snapshot.</p>;
  return (
    <section aria-labelledby={titleId} className="min-w-0 space-y-2">
      <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1">
        <h2 id={titleId} className="text-base font-medium">{label} <span className="font-normal text-ink-soft">{count} snapshot{count === 1 ? '' : 's'}</span></h2>
        <div data-no-print className="flex flex-wrap items-center gap-x-4">
          {zoomed && <Button kind="quiet" onPress={() => onView(null)}>Show the whole record</Button>}
          {stamps && count > 2 && <SegmentedControl label="Scale of the time axis" value={scale} onChange={setScale} options={scales} />}
        </div>
      </div>
      <div
        ref={box} role="slider" tabIndex={0} aria-label={`Snapshot on the beam of ${label}`} aria-valuemin={0} aria-valuemax={count - 1} aria-valuenow={read ?? 0} aria-valuetext={words || `${count} snapshots; arrow keys read them one by one`}
        className="min-w-0 touch-pan-y cursor-crosshair border-y border-rule bg-paper-raised select-none" {...handlers}
      >
        <canvas ref={canvas} aria-hidden className="block w-full" style={{ height: beamHeight }} />
      </div>
      <p aria-live="polite" className="min-h-6 text-sm tabular-nums">{words || <span className="text-ink-soft">Point at a snapshot or use the arrow keys to read it; drag, or press + and -, to look closer.</span>}</p>
      <BeamLegend record={record} second={second} />
      <details data-no-print onToggle={(event) => setTableOpen(event.currentTarget.open)} className="text-sm">
        <summary className="cursor-pointer text-ink-soft">As a table</summary>
        {tableOpen && <BeamTable record={record} label={label} second={second} />}
      </details>
    </section>
  );
}
