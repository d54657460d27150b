/** Where this page lies; the last entry is the page itself. */
import { Link } from './Link.tsx';

export function Breadcrumbs({ items }: { items: { label: string; to?: string }[] }) {
  return (
    <nav aria-label="Where this page lies" className="mb-4 text-sm">
      <ol className="flex flex-wrap items-baseline gap-x-2 gap-y-1 text-ink-soft">
        {items.map((item, i) => (
          <li key={`${item.label}${i}`} className="flex min-w-0 items-baseline gap-x-2">
            {i > 0 && <span aria-hidden className="text-rule-strong">/</span>}
            {item.to && i < items.length - 1 ? <Link to={item.to}>{item.label}</Link> : <span aria-current={i === items.length - 1 ? 'page' : undefined} className="break-words">{item.label}</span>}
          </li>
        ))}
      </ol>
    </nav>
  );
}
