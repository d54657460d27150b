/** Copies a text and says so. Where the clipboard is closed to the page it says that instead. */
import { useEffect, useState } from 'react';
import { Button } from './Button.tsx';

export function CopyButton({ text, label }: { text: string; label: string }) {
  const [state, setState] = useState<'copied' | 'refused' | null>(null);
  useEffect(() => {
    if (state === null) return;
    const timer = setTimeout(() => setState(null), 2500);
    return () => clearTimeout(timer);
  }, [state]);
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(text);
      setState('copied');
    } catch {
      setState('refused');
    }
  };
  return (
    <span data-no-print className="inline-flex items-baseline">
      <Button kind="quiet" aria-label={label} onPress={() => void copy()}>{state === 'copied' ? 'Copied' : state === 'refused' ? 'Select it and copy by hand' : 'Copy'}</Button>
      <span role="status" className="sr-only">{state === 'copied' ? 'Copied' : ''}</span>
    </span>
  );
}
