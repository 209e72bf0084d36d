export type ToastTone = 'done' | 'problem' | 'note';
export interface Toast {
  readonly id: number;
  readonly tone: ToastTone;
  readonly text: string;
}

let toasts: readonly Toast[] = [];
let nextId = 1;
const listeners = new Set<() => void>();

function publish(next: readonly Toast[]): void {
  toasts = next;
  for (const listener of listeners) listener();
}

/** Shows a short message. Problems stay until dismissed; the same text is not shown twice at once. */
export function showToast(tone: ToastTone, text: string): void {
  if (toasts.some((toast) => toast.text === text)) return;
  const toast: Toast = { id: nextId++, tone, text };
  publish([...toasts, toast].slice(-4));
  if (tone !== 'problem') setTimeout(() => dismissToast(toast.id), 5000);
}

export function dismissToast(id: number): void {
  publish(toasts.filter((toast) => toast.id !== id));
}

export const toastStore = {
  subscribe(listener: () => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  },
  read: (): readonly Toast[] => toasts,
};
