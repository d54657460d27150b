/** A modal sheet; Escape closes it, the focus stays inside and goes back. A press beside it does not, since something may have been typed. */
import { Dialog as AriaDialog, Heading, Modal, ModalOverlay } from 'react-aria-components';
import { Button } from './Button.tsx';

interface Props {
  title: string;
  isOpen: boolean;
  /** left out: it can be answered, not closed */
  onClose?: () => void;
  role?: 'dialog' | 'alertdialog';
  children: React.ReactNode;
}

export function Dialog({ title, isOpen, onClose, role = 'dialog', children }: Props) {
  return (
    <ModalOverlay
      isOpen={isOpen} isKeyboardDismissDisabled={!onClose} onOpenChange={(open) => { if (!open) onClose?.(); }}
      className="fixed inset-0 z-40 flex items-start justify-center overflow-y-auto bg-[#0a0e0f8c] p-3 sm:p-10"
    >
      <Modal className="w-full max-w-2xl border border-rule-strong bg-paper">
        <AriaDialog role={role} className="p-5 outline-none sm:p-7">
          <div className="mb-4 flex items-start justify-between gap-4 border-b border-rule pb-3">
            <Heading slot="title" level={2} className="text-xl">{title}</Heading>
            {onClose && <Button kind="quiet" aria-label="Close" onPress={onClose}><svg aria-hidden viewBox="0 0 12 12" className="m-1 size-3 stroke-current"><path d="M1 1l10 10M11 1L1 11" strokeWidth="1.600" /></svg></Button>}
          </div>
          {children}
        </AriaDialog>
      </Modal>
    </ModalOverlay>
  );
}
