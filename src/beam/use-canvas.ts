/** A canvas as wide as its box, sharp on any screen, drawn again when its size, its theme or what it shows changes. */
import { useEffect, useRef, useState } from 'react';

export function useWidth<T extends HTMLElement>() {
  const box = useRef<T>(null);
  const [width, setWidth] = useState(0);
  useEffect(() => {
    const element = box.current;
    if (!element) return;
    setWidth(Math.floor(element.clientWidth));
    if (typeof ResizeObserver === 'undefined') return;
    const observer = new ResizeObserver(([entry]) => setWidth(Math.floor(entry!.contentRect.width)));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return { box, width };
}

/** Changes when the theme does. */
export function useTheme(): string {
  const [theme, setTheme] = useState(() => document.documentElement.dataset.theme ?? 'light');
  useEffect(() => {
    const observer = new MutationObserver(() => setTheme(document.documentElement.dataset.theme ?? 'light'));
    observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
    return () => observer.disconnect();
  }, []);
  return theme;
}

export function useCanvas(width: number, height: number, draw: (context: CanvasRenderingContext2D) => void, needs: unknown[]) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const theme = useTheme();
  useEffect(() => {
    const element = canvas.current, context = element?.getContext('2d');
    if (!element || !context || width <= 0) return;
    const ratio = window.devicePixelRatio || 1;
    element.width = Math.round(width * ratio);
    element.height = Math.round(height * ratio);
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    context.clearRect(0, 0, width, height);
    draw(context);
    // `needs` is what `draw` depends on
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [width, height, theme, ...needs]);
  return canvas;
}
