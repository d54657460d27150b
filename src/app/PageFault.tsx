/** A page that broke: says so, keeps the rest of the application, and offers a way on. */
import { useRouteError } from 'react-router-dom';
import { Button } from '../components/Button.tsx';
import { LinkButton } from '../components/Link.tsx';
import { Notice } from '../components/Notice.tsx';

export function PageFault() {
  const error = useRouteError();
  // After an update of the server the parts of an older page are gone.
  const outdated = error instanceof TypeError && /import|module|fetch/i.test(error.message);
  return (
    <div className="mx-auto max-w-3xl py-8">
      <Notice kind="blocker" title={outdated ? 'This page could not be fetched.' : 'This page failed.'}>
        <p>{outdated ? 'The connection broke, or the server was updated meanwhile. Load the page again.' : 'Nothing on the server was changed by it. Load the page again; if it stays, tell the administrator what stands below.'}</p>
        {!outdated && <p className="mt-2 font-mono text-sm break-words">{error instanceof Error ? error.message : String(error)}</p>}
      </Notice>
      <div className="flex gap-2">
        <Button kind="primary" onPress={() => window.location.reload()}>Load again</Button>
        <LinkButton kind="plain" to="/">To the desk</LinkButton>
      </div>
    </div>
  );
}
