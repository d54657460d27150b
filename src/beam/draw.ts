/** Draws the beam on a canvas. */
import { quantityText } from '../components/number-format.ts';
import type { Ink } from './ink.ts';
import { binByPixel, splitRuns, ticksOf, type BeamRecord, type BeamScale } from './layout.ts';

export interface BeamPicture {
  width: number;
  positions: Float64Array;
  scale: BeamScale;
  log: boolean;
  weights: number[] | null;
  second: number[] | null;
  marks: { gaps: number[]; duplicates: number[]; restarts: number[] };
  split: string[] | null;
  records: BeamRecord[];
  selected: number | null;
  window: { from: number; to: number } | null;
  unit: string | null;
}

export const beamHeight = 132;
const top = 18, base = 92, band = 97, axis = 111;
const pad = 10;

const bandInk = (part: string, ink: Ink) => ({ train: ink.brass, validation: ink.verdigris, test: ink.ink, guard: ink.rule })[part] ?? ink.rule;

function hatch(context: CanvasRenderingContext2D, x0: number, x1: number, colour: string): void {
  context.save();
  context.beginPath();
  context.rect(x0, top, x1 - x0, base - top);
  context.clip();
  context.strokeStyle = colour;
  context.lineWidth = 1;
  context.beginPath();
  for (let x = x0 - (base - top); x < x1; x += 6) {
    context.moveTo(x, base);
    context.lineTo(x + (base - top), top);
  }
  context.stroke();
  context.restore();
}

export function drawBeam(context: CanvasRenderingContext2D, picture: BeamPicture, ink: Ink): void {
  const { width, positions, weights, marks, records } = picture;
  const inner = width - 2 * pad;
  const at = (j: number) => pad + positions[j]! * inner;
  const most = Math.max(largest(weights), largest(picture.second), Number.MIN_VALUE);
  if (picture.window) {
    context.fillStyle = ink.wash;
    const a = at(picture.window.from), b = at(picture.window.to);
    context.fillRect(Math.min(a, b), top, Math.abs(b - a), base - top);
  }
  for (const j of marks.gaps) if (j + 1 < positions.length) hatch(context, Math.min(at(j), at(j + 1)) + 2, Math.max(at(j), at(j + 1)) - 2, ink.amber);
  context.fillStyle = ink.strong;
  context.fillRect(pad, base, inner, 1);
  // Strokes: one a pixel column at the most.
  const bins = binByPixel(positions, weights, Math.max(1, Math.round(inner)));
  const thick = Math.max(1, Math.min(3, inner / Math.max(1, bins.length) / 2.5));
  context.fillStyle = ink.brass;
  for (const bin of bins) {
    const height = weights ? (bin.weight / most) * (base - top) : (base - top) * 0.6;
    context.fillRect(pad + bin.pixel - thick / 2, base - Math.max(1, height), thick, Math.max(1, height));
  }
  if (picture.second) {
    context.fillStyle = ink.ink;
    for (const bin of binByPixel(positions, picture.second, Math.max(1, Math.round(inner)))) context.fillRect(pad + bin.pixel - 2.5, base - (bin.weight / most) * (base - top) - 1, 5, 2);
  }
  context.strokeStyle = ink.oxide;
  context.lineWidth = 1.5;
  for (const j of marks.duplicates) context.strokeRect(at(j) - 2.5, top + 2, 5, base - top - 2);
  for (const j of marks.restarts) {
    // A step back: from the last stamp before, over the strip, to the stamp returned to.
    const from = j > 0 ? at(j - 1) : pad, to = at(j);
    context.beginPath();
    context.moveTo(from, base);
    context.lineTo(from, top - 8);
    context.lineTo(to, top - 8);
    context.lineTo(to, top);
    context.moveTo(to - 3, top - 4);
    context.lineTo(to, top);
    context.lineTo(to + 3, top - 4);
    context.stroke();
  }
  if (picture.split) {
    for (const { part, from, to } of splitRuns(picture.split)) {
      context.fillStyle = bandInk(part, ink);
      const a = at(from) - 1;
      context.fillRect(a, band, Math.max(2, at(to - 1) - a + 1), 5);
    }
  }
  context.font = '11px "Commissioner Variable", sans-serif';
  context.fillStyle = ink.soft;
  context.textBaseline = 'top';
  if (records.length > 1) {
    for (const record of records) {
      const a = at(record.from), b = at(record.from + record.count - 1);
      context.textAlign = 'left';
      context.fillText(clip(context, record.label, Math.max(20, b - a)), a, 1);
      context.fillRect(a - 2, top - 4, 1, axis - top);
    }
  }
  if (picture.selected !== null && picture.selected < positions.length) {
    context.fillStyle = ink.deep;
    const x = at(picture.selected);
    context.beginPath();
    context.moveTo(x - 5, top - 8);
    context.lineTo(x + 5, top - 8);
    context.lineTo(x, top);
    context.fill();
    context.fillRect(x - 0.5, top, 1, base - top);
  }
  if (records.length <= 1) drawAxis(context, picture, inner, ink);
}

function drawAxis(context: CanvasRenderingContext2D, { scale, log, unit }: BeamPicture, inner: number, ink: Ink): void {
  if (log) return;
  context.fillStyle = ink.soft;
  const ticks = ticksOf(scale.min, scale.max, Math.max(2, Math.floor(inner / 110)));
  ticks.forEach((value, i) => {
    const fraction = scale.max === scale.min ? 0.5 : (value - scale.min) / (scale.max - scale.min), x = pad + fraction * inner;
    context.textAlign = fraction < 0.05 ? 'left' : fraction > 0.92 ? 'right' : 'center';
    context.fillRect(x, axis - 6, 1, 4);
    context.fillText(`${quantityText(value, 5)}${i === ticks.length - 1 && unit ? ` ${unit}` : ''}`, x, axis);
  });
}

function largest(values: number[] | null): number {
  let most = 0;
  if (values) for (const value of values) if (value > most) most = value;
  return most;
}

function clip(context: CanvasRenderingContext2D, text: string, width: number): string {
  if (context.measureText(text).width <= width) return text;
  let short = text;
  while (short.length > 1 && context.measureText(`${short}…`).width > width) short = short.slice(0, -1);
  return `${short}…`;
}
