/** Says what will happen, and asks. */
import { Button } from './Button.tsx';
import { Dialog } from './Dialog.tsx';
import { ErrorPanel, type Refusal } from './ErrorPanel.tsx';

interface Props {
  title: string;
  action: string;
  danger?: boolean;
  pending: boolean;
  error: Refusal | null;
  onConfirm: () => void;
  onClose: () => void;
  children: React.ReactNode;
}

export function ConfirmDialog({ title, action, danger = false, pending, error, onConfirm, onClose, children }: Props) {
  return (
    <Dialog title={title} isOpen onClose={onClose} role={danger ? 'alertdialog' : 'dialog'}>
      <div className="space-y-4">
        <div>{children}</div>
        <ErrorPanel error={error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind={danger ? 'danger' : 'primary'} isPending={pending} onPress={onConfirm}>{action}</Button>
        </div>
      </div>
    </Dialog>
  );
}
