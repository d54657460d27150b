/** Slider and play through snapshots or modes; while playing, the next one is asked for when the last one has come. */
import { useEffect, useState } from 'react';
import { Button } from '../components/Button.tsx';

interface Props {
  index: number;
  count: number;
  onIndex: (index: number) => void;
  isFetching: boolean;
}

/** Pause between frames in milliseconds: no faster than eight a second. */
const pause = 125;

export function FramePlayer({ index, count, onIndex, isFetching }: Props) {
  const [asked, setAsked] = useState<number | null>(null);
  const [playing, setPlaying] = useState(false);
  const shown = asked !== null && isFetching ? asked : index;
  const running = playing && index < count - 1;
  useEffect(() => {
    if (!running || isFetching) return;
    const timer = setTimeout(() => onIndex(index + 1), pause);
    return () => clearTimeout(timer);
  }, [running, isFetching, index, onIndex]);
  const go = (to: number) => {
    setAsked(to);
    onIndex(to);
  };
  return (
    <div data-no-print className="flex flex-wrap items-center gap-3">
      <Button kind="plain" onPress={() => { if (!running && index >= count - 1) go(0); setPlaying(!running); }}>{running ? 'Pause' : 'Play'}</Button>
      <label className="flex min-h-11 min-w-56 flex-1 items-center gap-3 text-sm">
        <span className="whitespace-nowrap tabular-nums">{shown} <span className="text-ink-soft">of 0 to {count - 1}</span></span>
        <input aria-label="Index of what is shown" type="range" className="h-6 min-w-0 flex-1 accent-(--brass)" min={0} max={count - 1} value={shown} onChange={(event) => { setPlaying(false); go(Number(event.target.value)); }} />
      </label>
    </div>
  );
}
