import { X } from 'lucide-react';
import { useEffect, useId, useRef, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';
import { IconButton } from './icon-button';

interface DialogProps {
  title: ReactNode;
  children: ReactNode;
  /** Buttons at the foot, the primary one last. */
  footer?: ReactNode;
  /** Escape, the cross and a click beside the dialog; absent = it cannot be left without an answer. */
  onClose?: () => void;
  width?: 'narrow' | 'regular' | 'wide';
}

const WIDTHS = { narrow: 'max-w-[440px]', regular: 'max-w-[600px]', wide: 'max-w-[960px]' };

/**
 * A modal dialog on the browser's own element: focus stays inside, the rest is inert, focus goes back where it
 * came from. Render it only while it is open.
 */
export function Dialog({ title, children, footer, onClose, width = 'regular' }: DialogProps) {
  const ref = useRef<HTMLDialogElement>(null);
  const titleId = useId();
  useEffect(() => {
    const dialog = ref.current;
    const before = document.activeElement;
    if (dialog !== null && !dialog.open) {
      dialog.showModal();
      // Where people go on: the first field to fill in, else the first answer at the foot instead of the cross.
      const start =
        dialog.querySelector<HTMLElement>('form :is(input, select, textarea):not([readonly], [disabled])') ??
        dialog.querySelector<HTMLElement>('footer button');
      start?.focus();
    }
    return () => {
      dialog?.close();
      if (before instanceof HTMLElement && before.isConnected) before.focus();
    };
  }, []);
  return (
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      onCancel={(event) => {
        // React decides whether it is shown; the browser must not close it on its own.
        event.preventDefault();
        onClose?.();
      }}
      onMouseDown={(event) => {
        if (event.target === ref.current) onClose?.();
      }}
      className={classNames(
        'm-auto max-h-[calc(100dvh-2rem)] w-[calc(100vw-2rem)] flex-col overflow-hidden rounded-panel border border-seam bg-cloth p-0 text-ink open:flex',
        WIDTHS[width],
      )}
    >
      <header className="flex items-center justify-between gap-4 border-b border-seam py-2.5 pr-3 pl-5">
        <h2 id={titleId} className="text-lead">
          {title}
        </h2>
        {onClose === undefined ? null : <IconButton label="Close" icon={<X className="size-4" />} onClick={onClose} />}
      </header>
      <div className="min-h-0 flex-1 overflow-y-auto px-5 py-4">{children}</div>
      {footer === undefined ? null : <footer className="flex flex-wrap justify-end gap-2 border-t border-seam px-5 py-3">{footer}</footer>}
    </dialog>
  );
}
