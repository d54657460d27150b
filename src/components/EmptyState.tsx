/** An empty place says how to fill it. */
export function EmptyState({ title, children, action }: { title: string; children?: React.ReactNode; action?: React.ReactNode }) {
  return (
    <div className="border-y border-dashed border-rule-strong px-1 py-8">
      <p className="font-medium">{title}</p>
      {children && <div className="mt-1 max-w-prose text-pretty text-ink-soft">{children}</div>}
      {action && <div className="mt-4">{action}</div>}
    </div>
  );
}
