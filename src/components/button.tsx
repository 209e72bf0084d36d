import type { ComponentProps, ReactNode } from 'react';
import { Link, type LinkProps } from 'react-router-dom';
import { classNames } from '../lib/class-names';

export type ButtonVariant = 'primary' | 'secondary' | 'quiet' | 'danger';
export type ButtonSize = 'regular' | 'small';

const VARIANTS: Record<ButtonVariant, string> = {
  primary: 'bg-indigo text-on-indigo border-transparent hover:bg-indigo-deep',
  secondary: 'bg-cloth text-ink border-selvage hover:bg-fold',
  quiet: 'bg-transparent text-indigo border-transparent hover:bg-indigo-wash',
  danger: 'bg-madder text-on-madder border-transparent hover:bg-madder-deep',
};
const SIZES: Record<ButtonSize, string> = { regular: 'min-h-9 px-4 py-1.5 text-body', small: 'min-h-7 px-2.5 py-0.5 text-table' };

function buttonClass(variant: ButtonVariant, size: ButtonSize, className: string | undefined): string {
  return classNames(
    'inline-flex items-center justify-center gap-2 rounded-panel border font-semibold whitespace-nowrap no-underline transition-colors',
    'disabled:opacity-55 disabled:cursor-not-allowed',
    VARIANTS[variant],
    SIZES[size],
    className,
  );
}

interface ButtonLook {
  variant?: ButtonVariant;
  size?: ButtonSize;
  /** An icon before the words. */
  icon?: ReactNode;
}

/** A button with a verb on it. One `primary` a view. */
export function Button({
  variant = 'secondary',
  size = 'regular',
  icon,
  isBusy = false,
  className,
  children,
  disabled,
  type = 'button',
  ...rest
}: ComponentProps<'button'> & ButtonLook & { isBusy?: boolean }) {
  return (
    <button
      type={type}
      className={buttonClass(variant, size, className)}
      disabled={disabled === true || isBusy}
      aria-busy={isBusy || undefined}
      {...rest}
    >
      {isBusy ? (
        <span aria-hidden="true" className="size-3.5 animate-spin rounded-full border-2 border-current border-t-transparent" />
      ) : (
        icon
      )}
      {children}
    </button>
  );
}

/** Looks like a button, goes somewhere. */
export function ButtonLink({ variant = 'secondary', size = 'regular', icon, className, children, ...rest }: LinkProps & ButtonLook) {
  return (
    <Link className={buttonClass(variant, size, className)} {...rest}>
      {icon}
      {children}
    </Link>
  );
}
