import type { ReactNode } from 'react';
import { Button } from './button';
import { Dialog } from './dialog';
import { InlineError } from './field';

/** Asks before something that cannot be taken back. `confirmLabel` is the verb: "Strike out", "Remove member". */
export function ConfirmDialog({
  title,
  children,
  confirmLabel,
  isDestructive = false,
  isBusy = false,
  error,
  onConfirm,
  onCancel,
}: {
  title: ReactNode;
  children: ReactNode;
  confirmLabel: string;
  isDestructive?: boolean;
  isBusy?: boolean;
  error?: string | undefined;
  onConfirm: () => void;
  onCancel: () => void;
}) {
  return (
    <Dialog
      title={title}
      width="narrow"
      onClose={onCancel}
      footer={
        <>
          <Button onClick={onCancel}>Cancel</Button>
          <Button variant={isDestructive ? 'danger' : 'primary'} isBusy={isBusy} onClick={onConfirm}>
            {confirmLabel}
          </Button>
        </>
      }
    >
      {children}
      <InlineError message={error} />
    </Dialog>
  );
}
