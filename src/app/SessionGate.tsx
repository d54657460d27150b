/** Pages behind it know who is signed in; without a session it leads to sign-in and back. A session that ends meanwhile is renewed in place. */
import { useEffect, useState } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { sessionEnded } from '../api/client.ts';
import { useRoute } from '../api/route-query.ts';
import { Button } from '../components/Button.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { Skeleton } from '../components/Skeleton.tsx';
import { SignInAgain } from './SignInAgain.tsx';

export function SessionGate() {
  const location = useLocation();
  const client = useQueryClient();
  const me = useRoute(routes.getMe, {}, undefined, { staleTime: 60_000 });
  const [ended, setEnded] = useState(false);
  const signedIn = me.data !== undefined;
  useEffect(() => {
    if (!signedIn) return;
    const onEnd = () => setEnded(true);
    window.addEventListener(sessionEnded, onEnd);
    return () => window.removeEventListener(sessionEnded, onEnd);
  }, [signedIn]);
  if (me.isPending) return <Skeleton lines={8} label="Opening Pennyweight" />;
  if (!me.data) {
    if (me.error?.problem.status === 401) return <Navigate to={location.pathname === '/' ? '/sign-in' : `/sign-in?to=${encodeURIComponent(location.pathname + location.search)}`} replace />;
    return (
      <>
        <ErrorPanel error={me.error} />
        <Button kind="primary" onPress={() => void me.refetch()}>Try again</Button>
      </>
    );
  }
  return (
    <>
      <Outlet />
      {ended && <SignInAgain email={me.data.user.email} onDone={() => { setEnded(false); void client.invalidateQueries(); }} />}
    </>
  );
}
