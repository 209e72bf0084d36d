import { useEffect, useRef, useState } from 'react';
import { DraftOffer } from '../../../components/draft-offer';
import { TextArea } from '../../../components/field';
import { errorMessage } from '../../../lib/api-error';
import type { ShortlistItem } from '../../../lib/queries/shortlist-queries';
import { useDraft } from '../../../lib/use-draft';
import { useUpdateItem } from '../api/use-shortlist-changes';

const SAVE_AFTER_MS = 900;
const LONGEST_NOTE = 4000;

/** The note of an item. Saves itself when typing pauses or the field is left; an edit that cannot be saved stays in the browser. */
export function NoteField({ unknownId, item }: { unknownId: string; item: ShortlistItem }) {
  const update = useUpdateItem(unknownId, item.id);
  /** What is typed and not yet known to be saved; null = nothing. */
  const [typed, setTyped] = useState<string | null>(null);
  const isDirty = typed !== null && typed.trim() !== item.note;
  const draft = useDraft(`shortlist-note.${item.id}`, isDirty ? typed : null, item.note);
  const { mutate } = update;
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);

  const save = (text: string) => {
    clearTimeout(timer.current);
    if (text.trim() === item.note) return;
    mutate({ note: text }, { onSuccess: () => draft.clear() });
  };
  const saveRef = useRef(save);
  useEffect(() => {
    saveRef.current = save;
  });
  useEffect(() => {
    if (typed === null) return undefined;
    timer.current = setTimeout(() => saveRef.current(typed), SAVE_AFTER_MS);
    return () => clearTimeout(timer.current);
  }, [typed]);

  const state = update.isPending
    ? 'Saving …'
    : update.isError && isDirty
      ? `Not saved: ${errorMessage(update.error)}`
      : isDirty
        ? 'Not saved yet'
        : update.isSuccess
          ? 'Saved'
          : '';
  return (
    <div>
      {draft.offered === null || draft.offered.value === item.note || typed !== null ? null : (
        <DraftOffer
          savedAt={draft.offered.savedAt}
          what="note"
          onTake={() => {
            const text = draft.takeOffered();
            if (text !== null) setTyped(text);
          }}
          onDecline={draft.declineOffered}
        />
      )}
      <TextArea
        label="Note"
        rows={3}
        maxLength={LONGEST_NOTE}
        placeholder="Why it is kept, what speaks against it, what to measure next"
        value={typed ?? item.note}
        onChange={(event) => setTyped(event.target.value)}
        onBlur={() => {
          if (typed !== null) save(typed);
        }}
        hint={
          <span aria-live="polite" className={update.isError && isDirty ? 'text-madder' : undefined}>
            {state === '' ? '\u00a0' : state}
          </span>
        }
      />
    </div>
  );
}
