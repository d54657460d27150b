/** Asks for a reason before something that is recorded with one: a waiver, a return, a withdrawal. */
import { useState } from 'react';
import { reason as reasonSchema } from '#contract/shape.ts';
import type { ApiProblem } from '../api/api-problem.ts';
import { Dialog } from '../components/Dialog.tsx';
import { Button } from '../components/Button.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { TextField } from '../components/TextField.tsx';

interface Props {
  title: string;
  /** what will happen, in a sentence */
  explanation: React.ReactNode;
  action: string;
  danger?: boolean;
  pending: boolean;
  error: ApiProblem | null;
  onSubmit: (reason: string) => void;
  onClose: () => void;
}

export function ReasonDialog({ title, explanation, action, danger = false, pending, error, onSubmit, onClose }: Props) {
  const [reason, setReason] = useState('');
  const [tried, setTried] = useState(false);
  const checked = reasonSchema.safeParse(reason);
  const complaint = tried && !checked.success ? checked.error.issues[0]!.message : undefined;
  return (
    <Dialog title={title} isOpen onClose={onClose}>
      <form
        className="space-y-4"
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (checked.success) onSubmit(checked.data);
        }}
      >
        <p className="text-pretty">{explanation}</p>
        <TextField label="Reason" multiline rows={4} value={reason} onChange={setReason} error={complaint} autoFocus />
        <p className="text-sm text-ink-soft">The reason goes into the audit log and cannot be changed afterwards.</p>
        <ErrorPanel error={error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind={danger ? 'danger' : 'primary'} type="submit" isPending={pending}>{action}</Button>
        </div>
      </form>
    </Dialog>
  );
}
