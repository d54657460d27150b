/** The frame of every page: the beam as a mark, where to go, who is here, and the standing caution. */
import { useMemo } from 'react';
import { Link, NavLink, Outlet, ScrollRestoration, useNavigation } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { SessionContext, sessionFrom } from '../access/ability.ts';
import { useRoute } from '../api/route-query.ts';
import { AccountMenu } from './AccountMenu.tsx';
import { Balance } from './Balance.tsx';
import { PageAnnouncer } from './PageAnnouncer.tsx';
import { ThemeSwitch } from './ThemeSwitch.tsx';

export function Layout() {
  const me = useRoute(routes.getMe, {}, undefined, { staleTime: 60_000 });
  // Kept when the session has ended: the page stays while the person signs in again.
  const session = useMemo(() => (me.data ? sessionFrom(me.data) : null), [me.data]);
  const opening = useNavigation().state === 'loading';
  const places = session
    ? [
        { to: '/', label: 'Desk', end: true }, { to: '/campaigns', label: 'Campaigns' }, { to: '/datasets', label: 'Datasets' },
        ...(session.ability.can('review', 'Draft') ? [{ to: '/review', label: 'Review' }] : []),
        ...(session.ability.can('read', 'AuditEntry') ? [{ to: '/audit', label: 'Audit log' }] : []),
      ]
    : [];
  return (
    <SessionContext value={session}>
      <a href="#page" className="sr-only focus:not-sr-only focus:absolute focus:top-2 focus:left-2 focus:z-50 focus:bg-paper-raised focus:p-3">To the content</a>
      <header data-shell className="border-b border-rule-strong">
        <div className="mx-auto flex max-w-7xl flex-wrap items-center gap-x-2 gap-y-1 px-4 py-2 sm:gap-x-8 sm:px-8">
          <Link to="/" className="flex min-h-11 items-center gap-2.5 text-lg font-semibold tracking-tight"><Balance />Pennyweight</Link>
          {places.length > 0 && (
            <nav aria-label="Main" className="order-3 -mx-4 w-[calc(100%+2rem)] overflow-x-auto px-4 md:order-none md:mx-0 md:w-auto md:flex-1 md:px-0">
              <ul className="flex min-w-max gap-1">
                {places.map((place) => (
                  <li key={place.to}><NavLink to={place.to} end={place.end} className={({ isActive }) => `flex min-h-11 items-center border-b-2 px-2.5 -outline-offset-2 whitespace-nowrap ${isActive ? 'border-brass font-medium' : 'border-transparent text-ink-soft hover:text-ink'}`}>{place.label}</NavLink></li>
                ))}
              </ul>
            </nav>
          )}
          <div className="ml-auto flex items-center gap-1"><ThemeSwitch />{session && <AccountMenu />}</div>
        </div>
      </header>
      <div aria-hidden className={`-mt-0.5 h-0.5 bg-brass ${opening ? 'animate-pulse' : 'invisible'}`} />
      <main id="page" tabIndex={-1} className="mx-auto min-h-[70vh] max-w-7xl px-4 pt-6 pb-16 outline-none sm:px-8">
        <Outlet />
      </main>
      <footer data-shell className="border-t border-rule">
        <p className="mx-auto max-w-7xl px-4 py-4 text-sm text-pretty text-ink-soft sm:px-8">A release is training data, not a validated model: verify and validate what you train on it before anyone's safety depends on it. Export control, licence and confidentiality are for your organisation and its advisers to decide.{session?.me.demo && ' This is a demo with invented data.'}</p>
      </footer>
      <PageAnnouncer />
      <ScrollRestoration />
    </SessionContext>
  );
}
