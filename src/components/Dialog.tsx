/** A modal sheet; Escape closes it, the focus stays inside and goes back. */
import { Dialog as AriaDialog, Heading, Modal, ModalOverlay } from 'react-aria-components';
import { Button } from './Button.tsx';

interface Props {
  title: string;
  isOpen: boolean;
  onClose: () => void;
  children: React.ReactNode;
}

export function Dialog({ title, isOpen, onClose, children }: Props) {
  return (
    <ModalOverlay isOpen={isOpen} onOpenChange={(open) => !open && onClose()} isDismissable className="fixed inset-0 z-40 grid place-items-center overflow-y-auto bg-[#0009] p-3">
      <Modal className="w-full max-w-xl border border-rule-strong bg-paper">
        <AriaDialog className="p-5 outline-none sm:p-7">
          <div className="mb-4 flex items-start justify-between gap-4">
            <Heading slot="title" className="text-xl">{title}</Heading>
            <Button kind="quiet" aria-label="Close" onPress={onClose}>✕</Button>
          </div>
          {children}
        </AriaDialog>
      </Modal>
    </ModalOverlay>
  );
}
