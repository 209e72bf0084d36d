import type { ReactNode } from 'react';
import { EmptyState } from '../../../components/states';

/** What somebody sees who opens an address of the administration without the ability. */
export function AdminOnly({ isAllowed, children }: { isAllowed: boolean; children: ReactNode }) {
  if (isAllowed) return children;
  return (
    <EmptyState isPage title="This is for admins">
      People, teams and audit of the whole installation are kept by its admins.
    </EmptyState>
  );
}
