import { queryOptions } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../api-client';

export type CandidateRow = EndpointResponse<'listCandidates'>['rows'][number];
export type CandidateDetail = EndpointResponse<'readCandidate'>;
export type CandidateSort = 'rank' | 'carbonDeviation' | 'protonDeviation' | 'smiles';
export interface CandidateOrder {
  readonly sort: CandidateSort;
  readonly direction: 'ascending' | 'descending';
}

export const candidateKeys = {
  all: ['candidates'] as const,
  ofRun: (runId: string) => [...candidateKeys.all, 'run', runId] as const,
  page: (runId: string, order: CandidateOrder, page: number) => [...candidateKeys.ofRun(runId), order, page] as const,
  detail: (candidateId: string) => [...candidateKeys.all, 'detail', candidateId] as const,
};

export const CANDIDATE_PAGE_SIZE = 200;
/**
 * Candidates of an ended run never change; whether one is on the shortlist is asked of the shortlist. A request goes on
 * when nobody waits for it any more: its answer is kept, and a page that comes back does not ask a second time.
 */
export const candidatePageQuery = (runId: string, order: CandidateOrder, page: number) =>
  queryOptions({
    queryKey: candidateKeys.page(runId, order, page),
    queryFn: () => callEndpoint('listCandidates', { params: { runId }, query: { ...order, page, pageSize: CANDIDATE_PAGE_SIZE } }),
    staleTime: Infinity,
  });

export const candidateQuery = (candidateId: string) =>
  queryOptions({
    queryKey: candidateKeys.detail(candidateId),
    queryFn: () => callEndpoint('readCandidate', { params: { candidateId } }),
    staleTime: Infinity,
  });
