/** Text for a program: scrolls in its own box, can be copied whole. */
import { CopyButton } from './CopyButton.tsx';

export function CodeBlock({ text, label }: { text: string; label: string }) {
  return (
    <figure className="min-w-0 border border-rule bg-paper-raised">
      <figcaption className="flex items-center justify-between gap-4 border-b border-rule px-3 text-sm text-ink-soft">{label} <CopyButton text={text} label={`Copy ${label}`} /></figcaption>
      <pre tabIndex={0} role="region" aria-label={label} className="max-h-[36rem] overflow-auto p-3 font-mono text-sm leading-relaxed -outline-offset-2 print:max-h-none print:whitespace-pre-wrap">{text}</pre>
    </figure>
  );
}
