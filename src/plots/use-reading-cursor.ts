/** A cursor over the points of a plot, moved by arrow keys or by pointer; the properties make the plot a slider for assistive technology. */
import { useState } from 'react';

export function useReadingCursor(count: number, label: string, words: (index: number) => string) {
  const [at, setAt] = useState<number | null>(null);
  const cursor = at !== null && at < count ? at : null;
  const page = Math.max(10, Math.round(count / 50));
  const move = (to: number) => setAt(Math.max(0, Math.min(count - 1, to)));
  const start = cursor ?? -1;
  const keys: Record<string, () => void> = {
    ArrowRight: () => move(start + 1), ArrowUp: () => move(start + 1), ArrowLeft: () => move(start - 1), ArrowDown: () => move(start - 1),
    PageUp: () => move(start + page), PageDown: () => move(start - page), Home: () => move(0), End: () => move(count - 1), Escape: () => setAt(null),
  };
  return {
    cursor, setCursor: setAt,
    slider: {
      role: 'slider', tabIndex: 0, 'aria-label': label, 'aria-valuemin': 0, 'aria-valuemax': Math.max(0, count - 1), 'aria-valuenow': cursor ?? 0,
      'aria-valuetext': cursor === null ? `${count} values; arrow keys read them one by one` : words(cursor),
      onKeyDown: (event: React.KeyboardEvent) => {
        const act = event.ctrlKey || event.metaKey || event.altKey ? undefined : keys[event.key];
        if (!act || count === 0) return;
        event.preventDefault();
        act();
      },
    },
  } as const;
}
