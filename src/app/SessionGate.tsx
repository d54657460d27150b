/** Pages behind it know who is signed in; without a session it leads to sign-in and back. A session that ends meanwhile is said, not lost. */
import { useEffect, useState } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { sessionEnded } from '../api/client.ts';
import { useRoute } from '../api/route-query.ts';
import { LinkButton } from '../components/Link.tsx';
import { Dialog } from '../components/Dialog.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { Skeleton } from '../components/Skeleton.tsx';
import { Button } from '../components/Button.tsx';

export function SessionGate() {
  const location = useLocation();
  const client = useQueryClient();
  const me = useRoute(routes.getMe, {}, undefined, { staleTime: 60_000 });
  const [ended, setEnded] = useState(false);
  const signedIn = me.data !== undefined;
  useEffect(() => {
    const onEnd = () => signedIn && setEnded(true);
    window.addEventListener(sessionEnded, onEnd);
    return () => window.removeEventListener(sessionEnded, onEnd);
  }, [signedIn]);
  const here = encodeURIComponent(location.pathname + location.search);
  if (me.isPending) return <Skeleton lines={8} label="Loading" />;
  if (me.error && !me.data) return me.error.problem.status === 401 ? <Navigate to={location.pathname === '/' ? '/sign-in' : `/sign-in?to=${here}`} replace /> : <ErrorPanel error={me.error} />;
  return (
    <>
      <Outlet />
      {ended && (
        <Dialog title="Your session has ended" isOpen onClose={() => setEnded(false)}>
          <p className="mb-4">Sign in again in another tab, and go on here: what you typed is kept. Or sign in here and come back to this page.</p>
          <div className="flex flex-wrap justify-end gap-2">
            <Button kind="plain" onPress={() => void client.invalidateQueries().then(() => setEnded(false))}>I have signed in elsewhere</Button>
            <LinkButton to={`/sign-in?to=${here}`} onClick={() => setEnded(false)}>Sign in here</LinkButton>
          </div>
        </Dialog>
      )}
    </>
  );
}
