/** Ways around: those that the person may go. */
import { NavLink } from 'react-router-dom';
import { useAbility } from '../access/ability.ts';

export function MainNavigation() {
  const ability = useAbility();
  const places = [
    { to: '/', label: 'Desk', shown: true },
    { to: '/campaigns', label: 'Campaigns', shown: true },
    { to: '/datasets', label: 'Datasets', shown: true },
    { to: '/review', label: 'Review', shown: ability.can('review', 'Draft') },
    { to: '/audit', label: 'Audit log', shown: ability.can('read', 'AuditEntry') },
  ];
  return (
    <nav aria-label="Main" className="order-3 -mx-4 w-[calc(100%+2rem)] overflow-x-auto px-2 lg:order-2 lg:mx-0 lg:w-auto lg:overflow-visible lg:px-0">
      <ul className="flex w-max">
        {places.filter((place) => place.shown).map((place) => (
          <li key={place.to}>
            <NavLink
              to={place.to} end={place.to === '/'}
              className={({ isActive }) => `flex min-h-11 items-center border-b-2 px-2.5 -outline-offset-2 whitespace-nowrap sm:px-3 lg:-mb-px lg:min-h-16 ${isActive ? 'border-brass font-medium text-ink' : 'border-transparent text-ink-soft hover:text-ink'}`}
            >
              {place.label}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
