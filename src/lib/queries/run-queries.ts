import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { ENDED_RUN_STATUSES, type RunStatus } from '../../../shared/types/states';
import { callEndpoint, type EndpointResponse } from '../api-client';

export type Run = EndpointResponse<'readRun'>;
export type RunProgress = NonNullable<Run['progress']>;
export interface TeamRunFilter {
  readonly status: RunStatus | 'all';
  readonly page: number;
}

export const runKeys = {
  all: ['runs'] as const,
  lists: () => [...runKeys.all, 'list'] as const,
  teamList: (teamId: string, filter: TeamRunFilter) => [...runKeys.lists(), 'team', teamId, filter] as const,
  unknownList: (unknownId: string) => [...runKeys.lists(), 'unknown', unknownId] as const,
  detail: (runId: string) => [...runKeys.all, 'detail', runId] as const,
};

export const isEnded = (run: Pick<Run, 'status'>): boolean => ENDED_RUN_STATUSES.includes(run.status);
const LIST_REFRESH_MS = 3000;

/** An ended run never changes; one that is going on is patched by its event stream. */
export const runQuery = (runId: string) =>
  queryOptions({
    queryKey: runKeys.detail(runId),
    queryFn: ({ signal }) => callEndpoint('readRun', { params: { runId }, signal }),
    staleTime: (query) => (query.state.data !== undefined && isEnded(query.state.data) ? Infinity : 5_000),
  });

export const unknownRunsQuery = (unknownId: string) =>
  queryOptions({
    queryKey: runKeys.unknownList(unknownId),
    queryFn: ({ signal }) => callEndpoint('listRuns', { params: { unknownId }, signal }),
    refetchInterval: (query) => (query.state.data?.runs.some((run) => !isEnded(run)) === true ? LIST_REFRESH_MS : false),
  });

export const RUNS_PAGE_SIZE = 50;
export const teamRunsQuery = (teamId: string, filter: TeamRunFilter) =>
  queryOptions({
    queryKey: runKeys.teamList(teamId, filter),
    queryFn: ({ signal }) => callEndpoint('listTeamRuns', { params: { teamId }, query: { ...filter, pageSize: RUNS_PAGE_SIZE }, signal }),
    placeholderData: keepPreviousData,
    refetchInterval: (query) => (query.state.data?.rows.some((run) => !isEnded(run)) === true ? LIST_REFRESH_MS : false),
  });
