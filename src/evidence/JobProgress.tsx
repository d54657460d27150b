/** A job's progress, polled while it runs; survives a reload, since the server keeps it. */
import { useEffect } from 'react';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../access/ability.ts';
import { useRoute, useRouteMutation } from '../api/route-query.ts';
import { Button } from '../components/Button.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { Notice } from '../components/Notice.tsx';
import { ProgressBar } from '../components/ProgressBar.tsx';

const words = { check: 'Reading and checking', build: 'Building the matrix', release: 'Making the release' };

export function JobProgress({ jobId, campaignId, onDone }: { jobId: string; campaignId?: string; onDone?: () => void }) {
  const ability = useAbility();
  const job = useRoute(routes.getJob, { job: jobId }, undefined, { refetchInterval: (query) => (query.state.data && ['done', 'failed', 'cancelled'].includes(query.state.data.state) ? false : 700) });
  const cancel = useRouteMutation(routes.cancelJob, [routes.getJob]);
  const state = job.data?.state;
  useEffect(() => {
    if (state === 'done' || state === 'failed' || state === 'cancelled') onDone?.();
    // only a change of state asks for it
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [state]);
  if (!job.data || job.data.state === 'done') return null;
  const data = job.data;
  if (data.state === 'failed') return <Notice kind="blocker" title={`${words[data.kind]} failed.`}>{data.problem?.detail ?? 'No reason was recorded.'}</Notice>;
  if (data.state === 'cancelled') return <Notice kind="caution" title={`${words[data.kind]} was cancelled.`}>Nothing half-made was kept.</Notice>;
  const mayCancel = ability.can('cancel', about('Job', { campaignId, createdBy: data.createdBy?.id }));
  return (
    <div className="space-y-2">
      <ProgressBar
        label={data.state === 'queued' ? `${words[data.kind]}: waiting for its turn` : `${words[data.kind]}${data.phase ? `: ${data.phase}` : ''}`}
        done={data.done} total={data.total} unit={data.unit} rate={data.rate} secondsLeft={data.secondsLeft}
      />
      {mayCancel && <Button kind="quiet" isPending={cancel.isPending} onPress={() => cancel.mutate({ params: { job: jobId } })}>Cancel</Button>}
      <ErrorPanel error={cancel.error} />
    </div>
  );
}
