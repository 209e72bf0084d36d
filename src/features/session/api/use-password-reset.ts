import { useMutation } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';

export function useRequestReset() {
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (email: string) => callEndpoint('requestPasswordReset', { body: { email } }),
  });
}

export function useResetPassword(token: string) {
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (password: string) => callEndpoint('resetPassword', { params: { token }, body: { password } }),
  });
}
