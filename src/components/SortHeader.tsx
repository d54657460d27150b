/** The head of a column: each press goes on from as given to upward, downward and back. */
type Direction = 'ascending' | 'descending' | null;

const next = (direction: Direction): Direction => (direction === null ? 'ascending' : direction === 'ascending' ? 'descending' : null);

interface Props {
  label: string;
  numeric?: boolean;
  direction: Direction;
  onSort: (direction: Direction) => void;
}

export function SortHeader({ label, numeric = false, direction, onSort }: Props) {
  return (
    <th scope="col" aria-sort={direction ?? 'none'} className={`sticky top-0 z-10 border-b border-rule-strong bg-paper p-0 ${numeric ? 'text-right' : 'text-left'}`}>
      <button type="button" onClick={() => onSort(next(direction))} className={`plate flex min-h-11 w-full cursor-pointer items-center gap-1.5 px-3 whitespace-nowrap -outline-offset-2 hover:text-ink sm:min-h-9 [th:first-child>&]:pl-1 ${numeric ? 'justify-end' : ''}`}>
        {label}
        <svg aria-hidden viewBox="0 0 8 10" className={`h-2.5 w-2 fill-current ${direction ? 'text-brass' : 'opacity-35'}`}>
          {direction !== 'descending' && <path d="M4 0l4 4H0z" />}
          {direction !== 'ascending' && <path d="M4 10L0 6h8z" />}
        </svg>
      </button>
    </th>
  );
}
