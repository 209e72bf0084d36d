import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { unknownKeys } from '../../../lib/unknown-queries';

type CommentList = EndpointResponse<'listComments'>;

export const commentsQuery = (unknownId: string) =>
  queryOptions({
    queryKey: unknownKeys.comments(unknownId),
    queryFn: ({ signal }) => callEndpoint('listComments', { params: { unknownId }, signal }),
  });

export function useCreateComment(unknownId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (text: string) => callEndpoint('createComment', { params: { unknownId }, body: { text } }),
    onSuccess: (created) => {
      queryClient.setQueryData<CommentList>(unknownKeys.comments(unknownId), (list) =>
        list === undefined ? list : { comments: [...list.comments, created] },
      );
    },
  });
}

export function useRemoveComment(unknownId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (commentId: string) => callEndpoint('removeComment', { params: { commentId } }),
    onSuccess: (_, commentId) => {
      queryClient.setQueryData<CommentList>(unknownKeys.comments(unknownId), (list) =>
        list === undefined ? list : { comments: list.comments.filter((comment) => comment.id !== commentId) },
      );
    },
  });
}
