import type { ComponentProps, ReactNode } from 'react';
import { classNames } from '../lib/class-names';

/** A button that is only an icon; `label` is what it does, for screen readers and as a hint. */
export function IconButton({
  label,
  icon,
  tone = 'plain',
  className,
  type = 'button',
  ...rest
}: Omit<ComponentProps<'button'>, 'children'> & { label: string; icon: ReactNode; tone?: 'plain' | 'danger' }) {
  return (
    <button
      type={type}
      aria-label={label}
      title={label}
      className={classNames(
        'inline-flex size-7 shrink-0 items-center justify-center rounded-small text-faded transition-colors disabled:cursor-not-allowed disabled:opacity-50',
        tone === 'danger' ? 'hover:bg-madder-wash hover:text-madder' : 'hover:bg-fold hover:text-ink',
        className,
      )}
      {...rest}
    >
      {icon}
    </button>
  );
}
