import { Check, CircleAlert, Info, X } from 'lucide-react';
import { useSyncExternalStore } from 'react';
import { classNames } from '../lib/class-names';
import { dismissToast, toastStore } from '../lib/toasts';
import { IconButton } from './icon-button';

const ICONS = { done: Check, problem: CircleAlert, note: Info };
const TONES = { done: 'text-verdigris', problem: 'text-madder', note: 'text-indigo' };

/** Short messages at the foot of the window, read out politely. */
export function Toaster() {
  const toasts = useSyncExternalStore(toastStore.subscribe, toastStore.read);
  return (
    <div aria-live="polite" className="pointer-events-none fixed inset-x-4 bottom-20 z-20 flex flex-col items-center gap-2 tablet:bottom-5">
      {toasts.map((toast) => {
        const Icon = ICONS[toast.tone];
        return (
          <div
            key={toast.id}
            className="pointer-events-auto flex max-w-[560px] items-start gap-2.5 rounded-panel border border-selvage bg-cloth py-2 pr-2 pl-3"
          >
            <Icon aria-hidden="true" className={classNames('mt-[3px] size-4 shrink-0', TONES[toast.tone])} />
            <p className="min-w-0 py-px">{toast.text}</p>
            <IconButton label="Dismiss" icon={<X className="size-4" />} className="-my-0.5" onClick={() => dismissToast(toast.id)} />
          </div>
        );
      })}
    </div>
  );
}
