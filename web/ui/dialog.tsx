import type { ReactNode } from 'react';
import { Dialog as HeadlessDialog, DialogBackdrop, DialogPanel, DialogTitle } from '@headlessui/react';

interface DialogProps {
  open: boolean;
  onClose: () => void;
  title: ReactNode;
  children: ReactNode;
  /** The last one is the way on; the first one the way back. */
  actions: ReactNode;
}

/** Names the object and the effect; only for spending, sealing, signing, withdrawing and removing, and short forms. */
export function Dialog({ open, onClose, title, children, actions }: DialogProps) {
  return (
    <HeadlessDialog open={open} onClose={onClose} className="relative z-40 outline-none">
      <DialogBackdrop className="fixed inset-0 bg-scrim" />
      <div className="fixed inset-0 grid place-items-center overflow-y-auto p-3.5 max-rail:place-items-end">
        <DialogPanel className="w-full max-w-120 rounded-3 border border-rule-strong bg-sheet shadow-3">
          <DialogTitle className="px-5 pt-4.5 text-18 font-black tracking-tight">{title}</DialogTitle>
          <div className="px-5 pt-2 pb-4.5">{children}</div>
          <div className="flex flex-wrap justify-end gap-2 rounded-b-3 border-t border-rule bg-well px-5 py-3">
            {actions}
          </div>
        </DialogPanel>
      </div>
    </HeadlessDialog>
  );
}
