import { useId, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';

/** A piece of cloth on the linen: seam around it, title and actions above a second seam. */
export function Panel({
  title,
  actions,
  children,
  className,
  bodyClassName,
  isFlush = false,
}: {
  title?: ReactNode;
  actions?: ReactNode;
  children: ReactNode;
  className?: string;
  bodyClassName?: string;
  isFlush?: boolean;
}) {
  const id = useId();
  return (
    <section
      aria-labelledby={title === undefined ? undefined : id}
      className={classNames('min-w-0 rounded-panel border border-seam bg-cloth', className)}
    >
      {title === undefined && actions === undefined ? null : (
        <header className="flex min-h-11 flex-wrap items-center justify-between gap-x-4 gap-y-2 border-b border-seam px-4 py-1.5">
          <h2 id={id} className="text-body font-semibold">
            {title}
          </h2>
          {actions === undefined ? null : <div className="flex flex-wrap items-center gap-2">{actions}</div>}
        </header>
      )}
      <div className={classNames(!isFlush && 'p-4', bodyClassName)}>{children}</div>
    </section>
  );
}

/** Title of a view with what can be done there. */
export function PageHeader({ title, lead, actions }: { title: ReactNode; lead?: ReactNode; actions?: ReactNode }) {
  return (
    <header className="mb-5 flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
      <div className="min-w-0">
        <h1 className="text-title">{title}</h1>
        {lead === undefined ? null : <p className="mt-1 max-w-[80ch] text-pretty text-faded">{lead}</p>}
      </div>
      {actions === undefined ? null : <div className="flex flex-wrap items-center gap-2">{actions}</div>}
    </header>
  );
}
