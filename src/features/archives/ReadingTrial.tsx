/** What a corrected reading would do to shapes and stamps, asked of the server half a second after the last change. */
import { useEffect, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import type { Reading } from '#contract/reading.ts';
import { pathTo, type ResponseOf } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { send } from '../../api/client.ts';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { quantityText } from '../../components/number-format.ts';

export function ReadingTrial({ archive, reading }: { archive: string; reading: Reading }) {
  const [settled, setSettled] = useState(reading);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(reading), 500);
    return () => clearTimeout(timer);
  }, [reading]);
  const trial = useQuery<ResponseOf<typeof routes.tryReading>, ApiProblem>({
    queryKey: ['tryReading', archive, settled],
    queryFn: ({ signal }) => send('post', pathTo(routes.tryReading, { archive }), { body: { reading: settled }, signal }),
  });
  if (trial.error) return <ErrorPanel error={trial.error} />;
  if (!trial.data) return <p className="text-ink-soft" role="status">Trying the reading on the archive</p>;
  const { misfits, snapshots, nodes, stamps } = trial.data;
  if (misfits.length > 0) {
    return (
      <Notice kind="blocker" title="This reading does not fit the archive.">
        <ul className="list-disc pl-5">{misfits.map((misfit) => <li key={misfit.path + misfit.message}>{misfit.message}</li>)}</ul>
      </Notice>
    );
  }
  return (
    <Notice kind="sound" title="This reading fits.">
      {snapshots ?? '?'} snapshots of {nodes ?? '?'} values{stamps ? `, stamps from ${quantityText(stamps.from)} to ${quantityText(stamps.to)}` : ', no time stamps'}.
    </Notice>
  );
}
