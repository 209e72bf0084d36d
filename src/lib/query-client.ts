import { MutationCache, QueryCache, QueryClient } from '@tanstack/react-query';
import { ApiError, errorMessage, isSessionEnd } from './api-error';
import { showToast } from './toasts';

declare module '@tanstack/react-query' {
  interface Register {
    mutationMeta: {
      /** The caller shows the error beside the field or in its dialog; no message pops up. */
      showsOwnErrors?: boolean;
    };
  }
}

/** Trying again helps only when the answer did not come or the server stumbled. */
function mayRetry(failureCount: number, error: Error): boolean {
  if (error instanceof ApiError && error.status >= 400 && error.status < 500) return false;
  return failureCount < 2;
}

export const queryClient = new QueryClient({
  queryCache: new QueryCache({
    onError: (error, query) => {
      // A first load that fails is shown in place by the page; only a failed refresh of what is on screen is told here.
      if (query.state.data !== undefined && !isSessionEnd(error)) showToast('problem', errorMessage(error));
    },
  }),
  mutationCache: new MutationCache({
    onError: (error, _variables, _result, mutation) => {
      if (mutation.meta?.showsOwnErrors !== true && !isSessionEnd(error)) showToast('problem', errorMessage(error));
    },
  }),
  defaultOptions: {
    queries: { staleTime: 15_000, retry: mayRetry, refetchOnWindowFocus: true },
    mutations: { retry: false },
  },
});
