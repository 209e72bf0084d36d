import { RotateCw } from 'lucide-react';
import type { ReactNode } from 'react';
import { errorMessage } from '../lib/api-error';
import { classNames } from '../lib/class-names';
import { Button } from './button';
import { Notice } from './status-word';

/** Says what will be here and offers the first step. */
export function EmptyState({
  title,
  children,
  action,
  isPage = false,
}: {
  title: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
  /** It is all there is on the page, so its title is the page's. */ isPage?: boolean;
}) {
  const Title = isPage ? 'h1' : 'h2';
  return (
    <div className="flex flex-col items-center px-6 py-12 text-center">
      <svg
        aria-hidden="true"
        viewBox="0 0 96 32"
        className="mb-4 h-8 w-24 text-seam"
        fill="none"
        stroke="currentColor"
        strokeWidth="2"
        strokeLinecap="round"
      >
        <path d="M2 6h92M2 16h92M2 26h92" strokeDasharray="6 8" />
      </svg>
      <Title className="text-lead">{title}</Title>
      {children === undefined ? null : <div className="mt-1 max-w-[52ch] text-faded">{children}</div>}
      {action === undefined ? null : <div className="mt-5 flex flex-wrap justify-center gap-2">{action}</div>}
    </div>
  );
}

/** Grey threads where lines will be; announced once to screen readers. */
export function LoadingState({ label = 'Loading', lines = 5, className }: { label?: string; lines?: number; className?: string }) {
  return (
    <div role="status" className={classNames('space-y-3 p-4', className)}>
      <span className="sr-only">{label}</span>
      {Array.from({ length: lines }, (_, index) => (
        <div key={index} aria-hidden="true" className="skeleton h-4" style={{ width: `${92 - ((index * 23) % 47)}%` }} />
      ))}
    </div>
  );
}

/** What failed and a way to try again. */
export function ErrorState({
  title = 'This could not be loaded',
  error,
  onRetry,
}: {
  title?: ReactNode;
  error: unknown;
  onRetry?: () => void;
}) {
  return (
    <div role="alert" className="p-4">
      <Notice tone="madder" title={title}>
        <p>{errorMessage(error)}</p>
        {onRetry === undefined ? null : (
          <Button size="small" className="mt-2" icon={<RotateCw aria-hidden="true" className="size-3.5" />} onClick={onRetry}>
            Try again
          </Button>
        )}
      </Notice>
    </div>
  );
}
