/** Something broke while a page was drawn; usually a new version was installed meanwhile. */
import { useRouteError } from 'react-router-dom';
import { Button } from '../components/Button.tsx';
import { Notice } from '../components/Notice.tsx';

export function ErrorPage() {
  const error = useRouteError();
  return (
    <div className="mx-auto max-w-2xl p-6">
      <Notice kind="blocker" title="This page could not be shown.">{error instanceof Error ? error.message : 'No reason is known.'} Reload it; if it stays, tell the administrator.</Notice>
      <Button kind="primary" onPress={() => window.location.reload()}>Reload</Button>
    </div>
  );
}
