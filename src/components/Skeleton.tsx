/** Ruled lines that hold the place of what is being loaded, so that nothing jumps when it comes. */
export function Skeleton({ lines = 4, label }: { lines?: number; label: string }) {
  return (
    <div role="status" className="animate-pulse">
      <span className="sr-only">{label}</span>
      {Array.from({ length: lines }, (_, i) => (
        <span key={i} aria-hidden className="block h-9 border-b border-rule pt-3">
          <span className="block h-3 bg-rule" style={{ width: `${68 - ((i * 17) % 41)}%` }} />
        </span>
      ))}
    </div>
  );
}
