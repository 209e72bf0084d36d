import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { predictionKeys } from './keys';

export type Prediction = EndpointResponse<'predict'>;

/** Predicted spectra of a structure; asked by POST because a structure is long. The same structure gives the same answer. */
export const predictionQuery = (smiles: string) =>
  queryOptions({
    queryKey: predictionKeys.detail(smiles),
    queryFn: ({ signal }) => callEndpoint('predict', { body: { smiles }, signal }),
    staleTime: Infinity,
    retry: false,
    placeholderData: keepPreviousData,
  });
