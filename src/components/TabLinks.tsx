/** The parts of a page, each with an address of its own. */
import { NavLink } from 'react-router-dom';

interface Props {
  label: string;
  items: { to: string; label: React.ReactNode; end?: boolean }[];
}

export function TabLinks({ label, items }: Props) {
  return (
    <nav aria-label={label} className="mb-7 overflow-x-auto border-b border-rule">
      <ul className="flex w-max gap-x-1">
        {items.map((item) => (
          <li key={item.to}>
            <NavLink
              to={item.to} end={item.end}
              className={({ isActive }) => `-mb-px flex min-h-11 items-center border-b-2 px-3 -outline-offset-2 whitespace-nowrap tabular-nums hover:text-ink ${isActive ? 'border-brass font-medium text-ink' : 'border-transparent text-ink-soft'}`}
            >
              {item.label}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
