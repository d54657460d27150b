/** No page is at this address. */
import { LinkButton } from '../components/Link.tsx';
import { PageHeader } from '../components/PageHeader.tsx';

export function NotFoundPage() {
  return (
    <>
      <PageHeader title="There is no such page" lead="The address may be mistyped, or what it showed is gone." />
      <LinkButton to="/">To the desk</LinkButton>
    </>
  );
}
