/** The cursor and the view of a beam: moved by arrow keys and pointer, zoomed by dragging or + and -. */
import { useRef, useState } from 'react';
import { margin } from './draw-beam.ts';
import { nearestTo, type View } from './pixel-bins.ts';

const whole: View = { from: 0, to: 1 };
/** Narrower than this a drag is a press. */
const leastDrag = 5;

interface Given {
  position: Float64Array;
  width: number;
  selected: number | null;
  onSelect?: (index: number | null) => void;
  view: View;
  onView: (view: View | null) => void;
}

export function useBeamPointer({ position, width, selected, onSelect, view, onView }: Given) {
  const [moved, setMoved] = useState<number | null>(null);
  const [brush, setBrush] = useState<View | null>(null);
  const pressed = useRef<number | null>(null);
  const count = position.length;
  const cursor = moved !== null && moved < count ? moved : null;

  const at = (event: React.PointerEvent<HTMLElement>) => {
    const x = event.clientX - event.currentTarget.getBoundingClientRect().left - margin;
    return Math.min(view.to, Math.max(view.from, view.from + (x / Math.max(1, width - 2 * margin)) * (view.to - view.from)));
  };
  const zoom = (factor: number) => {
    const centre = cursor === null ? (view.from + view.to) / 2 : position[cursor];
    const half = Math.min(0.5, ((view.to - view.from) * factor) / 2);
    const from = Math.max(0, Math.min(1 - 2 * half, centre - half));
    onView(half >= 0.5 ? null : { from, to: from + 2 * half });
  };
  const move = (to: number) => {
    const next = Math.max(0, Math.min(count - 1, to));
    setMoved(next);
    const there = position[next];
    // The view follows the cursor.
    if (there < view.from || there > view.to) {
      const half = (view.to - view.from) / 2;
      const from = Math.max(0, Math.min(1 - 2 * half, there - half));
      onView({ from, to: from + 2 * half });
    }
  };
  const start = cursor ?? selected ?? -1;
  const page = Math.max(10, Math.round(count / 50));
  const keys: Record<string, () => void> = {
    ArrowRight: () => move(start + 1), ArrowUp: () => move(start + 1), ArrowLeft: () => move(start - 1), ArrowDown: () => move(start - 1),
    PageUp: () => move(start + page), PageDown: () => move(start - page), Home: () => move(0), End: () => move(count - 1),
    Enter: () => onSelect?.(cursor), ' ': () => onSelect?.(cursor), '+': () => zoom(0.5), '=': () => zoom(0.5), '-': () => zoom(2), '0': () => onView(null),
  };
  return {
    cursor, brush,
    zoomed: view.from > whole.from || view.to < whole.to,
    handlers: {
      onKeyDown: (event: React.KeyboardEvent) => {
        const act = event.ctrlKey || event.metaKey || event.altKey ? undefined : keys[event.key];
        if (!act || count === 0) return;
        event.preventDefault();
        act();
      },
      onPointerDown: (event: React.PointerEvent<HTMLElement>) => { if (event.button === 0) pressed.current = at(event); },
      onPointerMove: (event: React.PointerEvent<HTMLElement>) => {
        const here = at(event);
        setMoved(nearestTo(position, here));
        if (pressed.current !== null && event.buttons === 1) setBrush({ from: Math.min(pressed.current, here), to: Math.max(pressed.current, here) });
      },
      onPointerUp: (event: React.PointerEvent<HTMLElement>) => {
        const from = pressed.current;
        pressed.current = null;
        setBrush(null);
        if (from === null) return;
        const here = at(event);
        const drag = (Math.abs(here - from) / (view.to - view.from)) * width;
        if (drag >= leastDrag) onView({ from: Math.min(from, here), to: Math.max(from, here) });
        else onSelect?.(nearestTo(position, here));
      },
      onPointerLeave: () => { pressed.current = null; setBrush(null); setMoved(null); },
      onPointerCancel: () => { pressed.current = null; setBrush(null); },
    },
  };
}
