/** A canvas that is drawn at the screen's own resolution and again whenever its size, its data or the theme changes. */
import { useEffect, useRef, useState } from 'react';

export type Palette = Record<'paper' | 'paper-raised' | 'ink' | 'ink-soft' | 'rule' | 'rule-strong' | 'brass' | 'brass-deep' | 'brass-wash' | 'verdigris' | 'oxide' | 'amber' | 'train' | 'validation' | 'test', string>;

export const paletteNames: (keyof Palette)[] = ['paper', 'paper-raised', 'ink', 'ink-soft', 'rule', 'rule-strong', 'brass', 'brass-deep', 'brass-wash', 'verdigris', 'oxide', 'amber', 'train', 'validation', 'test'];

/** The tokens as they are now, for what is drawn outside style sheets. */
export function readPalette(): Palette {
  const style = getComputedStyle(document.documentElement);
  return Object.fromEntries(paletteNames.map((name) => [name, style.getPropertyValue(`--${name}`).trim() || '#000000'])) as Palette;
}

/** Counts up when the theme changes. */
export function useThemeTurn(): number {
  const [turn, setTurn] = useState(0);
  useEffect(() => {
    const watch = new MutationObserver(() => setTurn((now) => now + 1));
    watch.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
    return () => watch.disconnect();
  }, []);
  return turn;
}

/** Width of an element in CSS pixels, kept up to date. */
export function useWidth<T extends HTMLElement>(): { box: React.RefObject<T | null>; width: number } {
  const box = useRef<T>(null);
  const [width, setWidth] = useState(0);
  useEffect(() => {
    const element = box.current;
    if (!element) return;
    const measure = () => setWidth(Math.floor(element.clientWidth));
    measure();
    if (typeof ResizeObserver === 'undefined') return;
    const watch = new ResizeObserver(measure);
    watch.observe(element);
    return () => watch.disconnect();
  }, []);
  return { box, width };
}

export type Draw = (context: CanvasRenderingContext2D, width: number, height: number, palette: Palette) => void;

/** `draw` in CSS pixels; wrap it in useCallback, since a new one draws again. */
export function useDrawing(width: number, height: number, draw: Draw): React.RefObject<HTMLCanvasElement | null> {
  const ref = useRef<HTMLCanvasElement>(null);
  const turn = useThemeTurn();
  useEffect(() => {
    const canvas = ref.current;
    const context = width > 0 ? canvas?.getContext('2d') : null;
    if (!canvas || !context) return;
    const scale = window.devicePixelRatio || 1;
    canvas.width = Math.round(width * scale);
    canvas.height = Math.round(height * scale);
    context.setTransform(scale, 0, 0, scale, 0, 0);
    context.clearRect(0, 0, width, height);
    draw(context, width, height, readPalette());
  }, [width, height, draw, turn]);
  return ref;
}
