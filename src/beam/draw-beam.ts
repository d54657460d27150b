/** Draws the strip: marks as tall as their weight, hatched gaps, doubled duplicates, steps back, bands of the split, borders, axis. */
import { quantityText } from '../components/number-format.ts';
import type { Palette } from '../components/use-drawing.ts';
import { linearTicks } from '../components/axis-ticks.ts';
import { axisValueAt, positionOf, type BeamLayout } from './beam-layout.ts';
import type { BeamRecord } from './beam-record.ts';
import { binByPixel, pixelOf, type View } from './pixel-bins.ts';

export const beamHeight = 150;
export const margin = 8;
const stepRow = 16;
const bandHeight = 10;
const axisHeight = 34;

export interface BeamDrawing {
  record: BeamRecord;
  layout: BeamLayout;
  view: View;
  second: number[] | null;
  cursor: number | null;
  selected: number | null;
  brush: { from: number; to: number } | null;
}

interface Stage {
  context: CanvasRenderingContext2D;
  palette: Palette;
  pixels: number;
  /** y of the baseline and of the row beneath it */
  base: number;
  top: number;
  bottom: number;
  x(position: number): number;
  /** height of a weight */
  tall(weight: number): number;
}

export function drawBeam(context: CanvasRenderingContext2D, width: number, palette: Palette, drawing: BeamDrawing): void {
  const { record, view, second } = drawing;
  const pixels = Math.max(2, width - 2 * margin);
  const [least, most] = extremes(record.weights, second);
  const bands = record.split ? bandHeight + 4 : 0;
  const bottom = beamHeight - axisHeight - bands;
  const range = bottom - stepRow;
  // Where a rule has negative weights, the baseline rises so that they hang beneath it.
  const base = bottom - (least < 0 ? Math.min(0.5, -least / (most - least || 1)) * range : 0);
  const unit = least < 0 ? range / (most - least || 1) : range / (most || 1);
  const stage: Stage = { context, palette, pixels, base, top: stepRow, bottom, x: (position) => margin + pixelOf(position, view, pixels), tall: (weight) => weight * unit };
  if (drawing.brush) brushed(stage, drawing.brush);
  gaps(stage, drawing);
  marks(stage, drawing);
  if (second) compared(stage, drawing, second);
  duplicates(stage, drawing);
  restarts(stage, drawing);
  if (record.split) splitBands(stage, drawing, bottom + 4);
  borders(stage, drawing);
  axis(stage, drawing, beamHeight - axisHeight);
  for (const index of [drawing.selected, drawing.cursor]) if (index !== null) pointed(stage, drawing, index, index === drawing.selected);
}

function extremes(...all: (number[] | null)[]): [number, number] {
  let least = 0;
  let most = 0;
  for (const weights of all) for (const weight of weights ?? []) {
    if (weight < least) least = weight;
    if (weight > most) most = weight;
  }
  return [least, most || 1];
}

function hatch({ context, palette }: Stage, x: number, y: number, width: number, height: number): void {
  context.save();
  context.beginPath();
  context.rect(x, y, width, height);
  context.clip();
  context.strokeStyle = palette['rule-strong'];
  context.lineWidth = 1;
  context.beginPath();
  for (let s = x - height; s < x + width; s += 6) {
    context.moveTo(s, y + height);
    context.lineTo(s + height, y);
  }
  context.stroke();
  context.restore();
}

function gaps(stage: Stage, { record, layout }: BeamDrawing): void {
  for (const j of record.marks.gaps) {
    if (j + 1 >= record.count) continue;
    const x = stage.x(layout.position[j]) + 2;
    const width = stage.x(layout.position[j + 1]) - 2 - x;
    if (width >= 1 && x < stage.pixels + margin && x + width > margin) hatch(stage, x, stage.top, width, stage.bottom - stage.top);
  }
}

function marks(stage: Stage, { record, layout, view }: BeamDrawing): void {
  const { context, palette, pixels, base } = stage;
  const bins = binByPixel(layout.position, record.weights, view, pixels);
  const inView = bins.count.reduce((sum, count) => sum + count, 0);
  const thick = inView * 7 < pixels ? 2 : 1;
  for (let x = 0; x < pixels; x += 1) {
    if (bins.count[x] === 0) continue;
    const up = record.weights ? Math.max(bins.high[x], 0) : 0.72;
    context.fillStyle = palette.ink;
    context.fillRect(margin + x - (thick - 1) / 2, base - Math.max(1, stage.tall(up)), thick, Math.max(1, stage.tall(up)));
    if (bins.low[x] < 0) {
      context.fillStyle = palette.oxide;
      context.fillRect(margin + x - (thick - 1) / 2, base, thick, stage.tall(-bins.low[x]));
    }
  }
  context.fillStyle = palette['rule-strong'];
  context.fillRect(margin, base, pixels, 1);
}

/** Weights of another rule: a short dash at their height. */
function compared({ context, palette, pixels, base, tall }: Stage, { layout, view }: BeamDrawing, second: number[]): void {
  const bins = binByPixel(layout.position, second, view, pixels);
  context.fillStyle = palette.brass;
  for (let x = 0; x < pixels; x += 1) if (bins.count[x] > 0) context.fillRect(margin + x - 2, base - tall(bins.high[x]) - 1, 5, 2);
}

function duplicates({ context, palette, x, base, top }: Stage, { record, layout }: BeamDrawing): void {
  context.fillStyle = palette.oxide;
  for (const j of record.marks.duplicates) {
    const at = x(layout.position[j]);
    context.fillRect(at + 3, top + 8, 2, base - top - 8);
    context.fillRect(at - 1, top + 5, 6, 2);
  }
}

/** From the last stamp before the restart back to the first after it, with an arrow. */
function restarts({ context, palette, x, base }: Stage, { record, layout }: BeamDrawing): void {
  context.strokeStyle = palette.amber;
  context.fillStyle = palette.amber;
  context.lineWidth = 1.5;
  for (const j of record.marks.restarts) {
    if (j < 1) continue;
    const before = x(layout.position[j - 1]);
    const after = x(layout.position[j]);
    context.beginPath();
    context.moveTo(before, base);
    context.lineTo(before, 8);
    context.lineTo(after, 8);
    context.lineTo(after, 14);
    context.stroke();
    context.beginPath();
    context.moveTo(after - 4, 12);
    context.lineTo(after + 4, 12);
    context.lineTo(after, 19);
    context.fill();
  }
}

/** Told apart by place too: training full, validation in the upper half, test in the lower, left-out snapshots a thin line. */
const bandOf = { train: [0, 1], validation: [0, 0.45], test: [0.55, 0.45], guard: [0.45, 0.1] } as const;

function splitBands({ context, palette, x }: Stage, { record, layout }: BeamDrawing, y: number): void {
  const split = record.split!;
  const colours = { train: palette.train, validation: palette.validation, test: palette.test, guard: palette['rule-strong'] };
  const ends = new Set(layout.parts.map((part) => part.from));
  let from = 0;
  for (let j = 1; j <= split.length; j += 1) {
    if (j < split.length && split[j] === split[from] && !ends.has(j)) continue;
    const left = x(Math.min(layout.position[from], layout.position[j - 1])) - 1;
    const right = x(Math.max(layout.position[from], layout.position[j - 1])) + 1;
    const [offset, share] = bandOf[split[from]];
    context.fillStyle = colours[split[from]];
    context.fillRect(left, y + offset * bandHeight, Math.max(2, right - left), share * bandHeight);
    from = j;
  }
}

function borders({ context, palette, x, top }: Stage, { layout }: BeamDrawing): void {
  if (layout.parts.length < 2) return;
  context.fillStyle = palette.rule;
  for (let i = 1; i < layout.parts.length; i += 1) context.fillRect(Math.round(x((layout.parts[i - 1].end + layout.parts[i].start) / 2)), top, 1, beamHeight - axisHeight - top);
}

function axis({ context, palette, pixels, x }: Stage, { record, layout, view }: BeamDrawing, y: number): void {
  context.font = '12px "Commissioner Variable", sans-serif';
  context.textBaseline = 'top';
  context.fillStyle = palette['ink-soft'];
  context.textAlign = 'center';
  const fits = (text: string, at: number) => Math.min(Math.max(at, margin + context.measureText(text).width / 2), margin + pixels - context.measureText(text).width / 2);
  for (const part of layout.parts) {
    const left = Math.max(part.start, view.from);
    const right = Math.min(part.end, view.to);
    if (right < left) continue;
    const width = x(right) - x(left);
    if (layout.parts.length > 1) {
      if (width > context.measureText(part.label).width + 4) context.fillText(part.label, x((left + right) / 2), y + 18);
      if (width < 120) continue;
    }
    const values = layout.scale === 'log' ? elapsedDecades(part.low, part.step, part.high, width / 90) : linearTicks(axisValueAt(part, 'linear', left), axisValueAt(part, 'linear', right), width / 90);
    for (const value of values) {
      const position = positionOf(part, layout.scale, value);
      if (position < left - 1e-9 || position > right + 1e-9) continue;
      context.fillRect(x(position), y, 1, 4);
      const text = quantityText(value, 5);
      context.fillText(text, fits(text, x(position)), y + 5);
    }
  }
  if (layout.parts.length === 1) {
    context.textAlign = 'right';
    context.fillText(record.stamps ? `time${record.unit ? ` in ${record.unit}` : ''}` : 'index', margin + pixels, y + 20);
  }
}

function elapsedDecades(low: number, step: number, high: number, wanted: number): number[] {
  const most = Math.floor(Math.log10((high - low) / step));
  const every = Math.max(1, Math.ceil((most + 1) / Math.max(1, wanted - 1)));
  const values = [low];
  for (let power = 0; power <= most; power += every) values.push(low + step * 10 ** power);
  return values;
}

function brushed({ context, palette, x, top, bottom }: Stage, brush: { from: number; to: number }): void {
  context.fillStyle = palette['brass-wash'];
  context.fillRect(x(brush.from), top, x(brush.to) - x(brush.from), bottom - top);
}

function pointed({ context, palette, x, base, bottom, tall, top }: Stage, { record, layout }: BeamDrawing, index: number, chosen: boolean): void {
  if (index < 0 || index >= record.count) return;
  const at = x(layout.position[index]);
  const weight = record.weights ? record.weights[index] : 0.72;
  context.fillStyle = palette.brass;
  context.fillRect(at - 1.5, base - tall(weight), 3, tall(weight));
  context.beginPath();
  context.arc(at, Math.max(top - 2, base - tall(weight)), chosen ? 4.5 : 3.5, 0, 2 * Math.PI);
  context.fill();
  context.fillRect(at - 0.5, top - 6, 1, bottom - top + 6);
}
