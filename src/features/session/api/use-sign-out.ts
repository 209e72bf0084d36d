import { useMutation } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';

export function useSignOut() {
  return useMutation({
    mutationFn: () => callEndpoint('signOut'),
    // A fresh page: nothing of the person who left stays in memory.
    onSuccess: () => window.location.assign('/sign-in'),
  });
}
