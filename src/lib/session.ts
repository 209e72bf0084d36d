import { queryOptions, useSuspenseQuery } from '@tanstack/react-query';
import { useSyncExternalStore } from 'react';
import { callEndpoint, type EndpointResponse } from './api-client';

export type Me = EndpointResponse<'me'>;
export type Membership = Me['memberships'][number];

/** The signed-in person. Loaded before any page that needs it, so that `useMe` never waits. */
export const meQuery = queryOptions({
  queryKey: ['me'] as const,
  queryFn: ({ signal }) => callEndpoint('me', { signal }),
  staleTime: 60_000,
});

export function useMe(): Me {
  return useSuspenseQuery(meQuery).data;
}

const STORAGE_KEY = 'isoloom.team';
const listeners = new Set<() => void>();

/** Remembers which team the places without a team in their address show. */
export function rememberTeam(teamId: string): void {
  if (localStorage.getItem(STORAGE_KEY) === teamId) return;
  localStorage.setItem(STORAGE_KEY, teamId);
  for (const listener of listeners) listener();
}

const teamStore = {
  subscribe(listener: () => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  },
  read: (): string | null => localStorage.getItem(STORAGE_KEY),
};

/** The membership chosen last, else the first one; null for a person without a team. */
export function pickMembership(me: Me): Membership | null {
  const remembered = teamStore.read();
  return me.memberships.find((membership) => membership.teamId === remembered) ?? me.memberships[0] ?? null;
}

export function useCurrentTeam(): Membership | null {
  const me = useMe();
  useSyncExternalStore(teamStore.subscribe, teamStore.read);
  return pickMembership(me);
}
