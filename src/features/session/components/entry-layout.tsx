import type { ReactNode } from 'react';
import { Mark } from '../../../components/mark';

/** Pages before the rail exists: one narrow column. */
export function EntryLayout({ title, lead, children }: { title: ReactNode; lead?: ReactNode; children: ReactNode }) {
  return (
    <main className="mx-auto flex min-h-dvh w-full max-w-[460px] flex-col px-4 py-10 tablet:pt-[12dvh]">
      <p className="mb-8 flex items-center gap-3">
        <Mark size={36} />
        <span className="text-title font-semibold tracking-tight">Isoloom</span>
      </p>
      <h1 className="text-title">{title}</h1>
      {lead === undefined ? null : <p className="mt-1 text-faded">{lead}</p>}
      <div className="mt-6 space-y-6">{children}</div>
    </main>
  );
}
