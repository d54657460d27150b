/** Facts with their names, on ruled lines. */
export function KeyValue({ items }: { items: readonly { label: string; value: React.ReactNode }[] }) {
  return (
    <dl className="grid max-w-3xl border-t border-rule sm:grid-cols-[minmax(10rem,max-content)_1fr]">
      {items.map((item) => (
        <div key={item.label} className="grid gap-x-8 border-b border-rule py-1.5 sm:col-span-2 sm:grid-cols-subgrid">
          <dt className="text-sm leading-6 text-ink-soft">{item.label}</dt>
          <dd className="min-w-0 break-words tabular-nums">{item.value}</dd>
        </div>
      ))}
    </dl>
  );
}
