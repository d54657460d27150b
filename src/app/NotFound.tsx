/** An address that leads nowhere. */
import { LinkButton } from '../components/Link.tsx';
import { PageHeader } from '../components/PageHeader.tsx';

export function NotFound() {
  return (
    <>
      <PageHeader title="There is no such page." lead="The address may be mistyped, or the thing it named has been moved. Nothing was changed." />
      <LinkButton to="/">To the desk</LinkButton>
    </>
  );
}
