import { useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';
import { runKeys, runQuery } from '../../../lib/queries/run-queries';
import { unknownKeys } from '../../../lib/unknown-queries';
import { runSetupKeys } from './keys';

export interface StartRunInput {
  readonly revisionId: string;
  readonly keep: number;
  readonly maxSeconds: number | null;
  readonly maxConstitutions: number | null;
}

export function useStartRun(unknownId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: StartRunInput) => callEndpoint('startRun', { params: { unknownId }, body }),
    meta: { showsOwnErrors: true },
    onSuccess: async (run) => {
      queryClient.setQueryData(runQuery(run.id).queryKey, run);
      await Promise.all([
        queryClient.invalidateQueries({ queryKey: runKeys.lists() }),
        queryClient.invalidateQueries({ queryKey: unknownKeys.all }),
        queryClient.invalidateQueries({ queryKey: runSetupKeys.all, refetchType: 'none' }),
      ]);
    },
  });
}
