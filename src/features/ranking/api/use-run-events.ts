import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { runProgressSchema, runResponse } from '../../../../shared/schemas/runs';
import { callEndpoint, endpointUrl } from '../../../lib/api-client';
import { candidateKeys } from '../../../lib/queries/candidate-queries';
import { isEnded, runKeys, runQuery, type Run } from '../../../lib/queries/run-queries';
import { unknownKeys } from '../../../lib/unknown-queries';

const FIRST_RETRY_MS = 1000;
const LONGEST_RETRY_MS = 15_000;

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    // Cut off on the way; the caller falls back to asking for the run.
    return undefined;
  }
}

async function acceptRun(queryClient: QueryClient, run: Run): Promise<void> {
  // An answer that was under way while the run ended must not bring it back to life.
  queryClient.setQueryData(runQuery(run.id).queryKey, (known) => (known !== undefined && isEnded(known) ? known : run));
  if (!isEnded(run)) return;
  await Promise.all([
    queryClient.invalidateQueries({ queryKey: runKeys.lists() }),
    queryClient.invalidateQueries({ queryKey: candidateKeys.ofRun(run.id) }),
    queryClient.invalidateQueries({ queryKey: unknownKeys.all }),
  ]);
}

/**
 * Follows a run that is going on: its events patch the cached run until it ends. The browser reconnects a dropped
 * stream by itself; one that the server refused (ended session, restart) is opened anew after asking for the run,
 * which also renews the session.
 *
 * @returns whether events arrive, so that the page can say that its figures may be old.
 */
export function useRunEvents(runId: string, isLive: boolean): 'connected' | 'reconnecting' {
  const queryClient = useQueryClient();
  const [state, setState] = useState<'connected' | 'reconnecting'>('connected');

  useEffect(() => {
    if (!isLive) return undefined;
    let source: EventSource | null = null;
    let timer: ReturnType<typeof setTimeout> | undefined;
    let retryMs = FIRST_RETRY_MS;
    let isOver = false;
    let hasDropped = false;

    const askForRun = async () => {
      try {
        await acceptRun(queryClient, await callEndpoint('readRun', { params: { runId } }));
      } catch {
        // No answer, or the session has ended, which the api client announces; the stream is tried again anyway.
      }
    };
    const openLater = () => {
      timer = setTimeout(() => void askForRun().then(open), retryMs);
      retryMs = Math.min(retryMs * 2, LONGEST_RETRY_MS);
    };
    const open = () => {
      if (isOver) return;
      source = new EventSource(endpointUrl('runEvents', { params: { runId } }), { withCredentials: true });
      source.onopen = () => {
        setState('connected');
        retryMs = FIRST_RETRY_MS;
        // Whatever happened during the gap was not heard.
        if (hasDropped) void askForRun();
        hasDropped = false;
      };
      source.onerror = () => {
        setState('reconnecting');
        hasDropped = true;
        if (source?.readyState === EventSource.CLOSED) openLater();
      };
      source.addEventListener('progress', (event: MessageEvent<string>) => {
        const progress = runProgressSchema.safeParse(parseJson(event.data));
        if (!progress.success) return;
        queryClient.setQueryData(runQuery(runId).queryKey, (run) =>
          run === undefined || isEnded(run) ? run : { ...run, progress: progress.data },
        );
      });
      source.addEventListener('run', (event: MessageEvent<string>) => {
        const run = runResponse.safeParse(parseJson(event.data));
        void (run.success ? acceptRun(queryClient, run.data) : askForRun());
      });
    };
    open();
    return () => {
      isOver = true;
      clearTimeout(timer);
      source?.close();
    };
  }, [queryClient, runId, isLive]);
  return state;
}
