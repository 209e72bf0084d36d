import { useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';
import { runKeys, runQuery } from '../../../lib/queries/run-queries';

export function useCancelRun(runId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => callEndpoint('cancelRun', { params: { runId } }),
    onSuccess: async (run) => {
      queryClient.setQueryData(runQuery(run.id).queryKey, run);
      await queryClient.invalidateQueries({ queryKey: runKeys.lists() });
    },
  });
}
