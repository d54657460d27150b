/** One delivery on its way: progress, pause and resume, choosing the files again after a reload, giving up. */
import { useState } from 'react';
import type { Delivery } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ConfirmDialog } from '../../components/ConfirmDialog.tsx';
import { DropZone } from '../../components/DropZone.tsx';
import { LinkButton } from '../../components/Link.tsx';
import { bytesText } from '../../components/number-format.ts';
import { Notice } from '../../components/Notice.tsx';
import { ProgressBar } from '../../components/ProgressBar.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { sendQueue, type Sending } from './send-queue.ts';

export function DeliveryEntry({ delivery, sending }: { delivery: Delivery; sending: Sending | undefined }) {
  const cancel = useRouteMutation(routes.cancelDelivery, [routes.listDeliveries]);
  const [givingUp, setGivingUp] = useState(false);
  const [misfit, setMisfit] = useState<string | null>(null);
  const total = delivery.files.reduce((sum, file) => sum + file.bytes, 0);
  const sent = delivery.files.reduce((sum, file) => sum + Math.max(file.received, sending?.files.find((each) => each.id === file.id)?.sent ?? 0), 0);
  const states = sending?.files.map((file) => file.state) ?? [];
  const trouble = sending?.files.find((file) => file.problem);
  const missing = delivery.files.filter((file) => file.state !== 'verified' && !sending?.files.some((each) => each.id === file.id));
  const chooseAgain = (files: File[]) => {
    const fitting = files.filter((file) => missing.some((known) => known.name === file.name && known.bytes === file.size));
    const other = files.find((file) => !fitting.includes(file));
    setMisfit(other ? `${other.name} (${bytesText(other.size)}) is not one of the files that are missing: ${missing.map((file) => `${file.name} (${bytesText(file.bytes)})`).join(', ')}.` : null);
    if (fitting.length > 0) sendQueue.add(delivery, new Map(fitting.map((file) => [file.name, file])));
  };
  const label = `Run ${delivery.run}: ${delivery.files.length === 1 ? delivery.files[0]!.name : `${delivery.files.length} files`}`;
  return (
    <li className="space-y-3 py-4">
      {delivery.state === 'complete' ? (
        <div className="flex flex-wrap items-center justify-between gap-3">
          <span className="flex flex-wrap items-center gap-4">{label} <StatusMark kind="sound" label="received and verified" /></span>
          {delivery.archive && <LinkButton kind="plain" to={`/archives/${delivery.archive}`}>See the archive</LinkButton>}
        </div>
      ) : delivery.state === 'refused' ? (
        <Notice kind="blocker" title={`${label} was refused.`}>{delivery.problem}</Notice>
      ) : (
        <ProgressBar label={states.includes('verifying') ? `${label}: verifying` : label} done={sent} total={total} unit="bytes" rate={states.includes('sending') ? sending?.rate : null} secondsLeft={states.includes('sending') ? sending?.secondsLeft : null} />
      )}
      {trouble && delivery.state !== 'refused' && <Notice kind="caution" title={`${trouble.name} is not being sent.`}>{trouble.problem}</Notice>}
      {delivery.state === 'open' && missing.length > 0 && (
        <>
          <DropZone label="Choose the files again" hint={`Sending was interrupted. Choose ${missing.map((file) => file.name).join(', ')} again: it goes on where it stopped.`} onFiles={chooseAgain} />
          {misfit && <p className="text-oxide" role="alert">{misfit}</p>}
        </>
      )}
      <div className="flex flex-wrap gap-2">
        {states.some((state) => state === 'sending' || state === 'waiting') && <Button kind="plain" onPress={() => sendQueue.pause(delivery.id)}>Pause</Button>}
        {states.some((state) => state === 'paused' || state === 'failed' || state === 'signed-out') && <Button kind="primary" onPress={() => sendQueue.resume(delivery.id)}>Resume</Button>}
        {delivery.state !== 'complete' && <Button kind="quiet" onPress={() => setGivingUp(true)}>{delivery.state === 'refused' ? 'Take off the list' : 'Give up'}</Button>}
      </div>
      {givingUp && (
        <ConfirmDialog title="Give this delivery up" action="Give up" danger pending={cancel.isPending} error={cancel.error} onClose={() => setGivingUp(false)}
          onConfirm={() => { sendQueue.remove(delivery.id); cancel.mutate({ params: { delivery: delivery.id } }, { onSuccess: () => setGivingUp(false) }); }}>
          What was received of it ({bytesText(sent)}) is removed. Nothing of it was visible to others.
        </ConfirmDialog>
      )}
    </li>
  );
}
