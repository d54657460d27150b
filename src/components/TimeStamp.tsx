/** A moment in the reader's own time zone; the exact moment in UTC when pointed at. */
const day = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', year: 'numeric' });
const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' });

export function TimeStamp({ at, seconds = false }: { at: string; seconds?: boolean }) {
  const date = new Date(at);
  if (Number.isNaN(date.getTime())) return <span>{at}</span>;
  const exact = date.toISOString();
  return (
    <time dateTime={exact} title={exact} className="whitespace-nowrap tabular-nums">
      {day.format(date)}, {clock.format(date)}{seconds && `:${String(date.getSeconds()).padStart(2, '0')}`}
    </time>
  );
}
