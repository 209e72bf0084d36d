import { useQuery } from '@tanstack/react-query';
import { Trash2 } from 'lucide-react';
import { useState, type FormEvent } from 'react';
import { useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { commentCreateRequest } from '../../../../shared/schemas/unknowns';
import { Button } from '../../../components/button';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { DraftOffer } from '../../../components/draft-offer';
import { TextArea } from '../../../components/field';
import { IconButton } from '../../../components/icon-button';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { Time } from '../../../components/time';
import { errorMessage, isSessionEnd, issueFor } from '../../../lib/api-error';
import { queryClient } from '../../../lib/query-client';
import { unknownQuery } from '../../../lib/unknown-queries';
import { useDraft } from '../../../lib/use-draft';
import { commentsQuery, useCreateComment, useRemoveComment } from '../api/comments';

export function loader({ params }: LoaderFunctionArgs) {
  void queryClient.prefetchQuery(commentsQuery(params['unknownId'] ?? ''));
  return null;
}

export function Component() {
  const { unknownId = '' } = useParams();
  const comments = useQuery(commentsQuery(unknownId));
  const canComment = useQuery(unknownQuery(unknownId)).data?.abilities.comment === true;
  return (
    <div className="max-w-[72ch]">
      {comments.isPending ? (
        <LoadingState label="Loading comments" />
      ) : comments.isError ? (
        <ErrorState title="The comments could not be loaded" error={comments.error} onRetry={() => void comments.refetch()} />
      ) : comments.data.comments.length === 0 ? (
        <EmptyState title="No comments yet">
          Questions, doubts and agreements about this unknown, for everyone in the team to read.
        </EmptyState>
      ) : (
        <CommentList unknownId={unknownId} comments={comments.data.comments} />
      )}
      {canComment ? <CommentForm key={unknownId} unknownId={unknownId} /> : null}
    </div>
  );
}

interface Comment {
  id: string;
  author: { name: string };
  text: string;
  createdAt: string;
  abilities: { remove: boolean };
}

function CommentList({ unknownId, comments }: { unknownId: string; comments: readonly Comment[] }) {
  const [leaving, setLeaving] = useState<Comment | null>(null);
  const remove = useRemoveComment(unknownId);
  return (
    <>
      <ol className="divide-y divide-seam">
        {comments.map((comment) => (
          <li key={comment.id} className="py-3">
            <div className="flex min-h-7 items-center gap-2">
              <span className="font-semibold">{comment.author.name}</span>
              <span className="text-table text-faded">
                <Time iso={comment.createdAt} />
              </span>
              {comment.abilities.remove ? (
                <IconButton
                  label="Remove this comment"
                  tone="danger"
                  className="ml-auto"
                  icon={<Trash2 className="size-4" />}
                  onClick={() => setLeaving(comment)}
                />
              ) : null}
            </div>
            <p className="break-words whitespace-pre-line">{comment.text}</p>
          </li>
        ))}
      </ol>
      {leaving === null ? null : (
        <ConfirmDialog
          title="Remove this comment?"
          confirmLabel="Remove"
          isDestructive
          isBusy={remove.isPending}
          onCancel={() => setLeaving(null)}
          onConfirm={() => remove.mutate(leaving.id, { onSettled: () => setLeaving(null) })}
        >
          It disappears for everyone in the team.
        </ConfirmDialog>
      )}
    </>
  );
}

function CommentForm({ unknownId }: { unknownId: string }) {
  const [text, setText] = useState('');
  const [issue, setIssue] = useState<string>();
  const create = useCreateComment(unknownId);
  const draft = useDraft(`comment.${unknownId}`, text === '' ? null : text);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = commentCreateRequest.safeParse({ text });
    setIssue(parsed.error?.issues[0]?.message);
    if (!parsed.success) return;
    create.mutate(parsed.data.text, {
      onSuccess: () => {
        setText('');
        draft.clear();
      },
    });
  };
  return (
    <form noValidate onSubmit={submit} className="mt-4 space-y-3 border-t border-seam pt-4">
      {draft.offered === null ? null : (
        <DraftOffer
          what="comment"
          savedAt={draft.offered.savedAt}
          onTake={() => setText(draft.takeOffered() ?? '')}
          onDecline={draft.declineOffered}
        />
      )}
      <TextArea
        label="Comment"
        rows={3}
        maxLength={4000}
        value={text}
        error={
          issue ??
          issueFor(create.error, 'text') ??
          (create.isError && !isSessionEnd(create.error) ? errorMessage(create.error) : undefined)
        }
        onChange={(event) => setText(event.target.value)}
      />
      <Button type="submit" variant="primary" isBusy={create.isPending}>
        Add comment
      </Button>
    </form>
  );
}
