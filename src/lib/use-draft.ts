import { useCallback, useEffect, useRef, useState } from 'react';
import { useMe } from './session';

const PREFIX = 'isoloom.draft.';
const MAX_AGE_MS = 30 * 24 * 3600 * 1000;

export interface StoredDraft<T> {
  value: T;
  /** What the draft was started from, for instance a revision number; the caller decides whether it still fits. */
  base: string;
  savedAt: string;
}

const storageKey = (userId: string, key: string) => `${PREFIX}${userId}.${key}`;

export function readDraft<T>(userId: string, key: string): StoredDraft<T> | null {
  const text = localStorage.getItem(storageKey(userId, key));
  if (text === null) return null;
  try {
    const draft = JSON.parse(text) as StoredDraft<T>;
    if (typeof draft.savedAt === 'string' && Date.now() - Date.parse(draft.savedAt) < MAX_AGE_MS) return draft;
  } catch {
    // A draft that cannot be read is no draft.
  }
  localStorage.removeItem(storageKey(userId, key));
  return null;
}

export function writeDraft<T>(userId: string, key: string, draft: StoredDraft<T>): void {
  try {
    localStorage.setItem(storageKey(userId, key), JSON.stringify(draft));
  } catch {
    // Storage full or forbidden: the edit stays on the page, only the safety copy is missing.
  }
}

export function dropDraft(userId: string, key: string): void {
  localStorage.removeItem(storageKey(userId, key));
}

export interface Draft<T> {
  /** An edit left behind earlier (closed tab, ended session), to be offered; null when there is none or it was answered. */
  offered: StoredDraft<T> | null;
  /** Takes the offered edit and hands its value back. */
  takeOffered: () => T | null;
  /** Throws the offered edit away. */
  declineOffered: () => void;
  /** Forgets the edit; call it after a successful save and on discard. */
  clear: () => void;
}

/**
 * Keeps an edit in the browser until it is saved, and offers it again after signing in again. Kept per person:
 * nobody is offered somebody else's edit on a shared machine.
 *
 * @param key - what is edited, for instance `evidence.${unknownId}`.
 * @param value - the edited value, JSON-safe; null while nothing differs from what is saved.
 * @param base - what the edit starts from, for instance the number of the current revision.
 */
export function useDraft<T>(key: string, value: T | null, base = ''): Draft<T> {
  const userId = useMe().user.id;
  const slot = storageKey(userId, key);
  const [offer, setOffer] = useState<{ slot: string; draft: StoredDraft<T> | null }>(() => ({ slot, draft: readDraft<T>(userId, key) }));
  // The page moved on to another thing to edit without unmounting.
  if (offer.slot !== slot) setOffer({ slot, draft: readDraft<T>(userId, key) });
  const isTouched = useRef(false);

  useEffect(() => {
    if (value !== null) {
      isTouched.current = true;
      writeDraft(userId, key, { value, base, savedAt: new Date().toISOString() });
    } else if (isTouched.current) {
      // Edited back to what is saved: the copy goes too. Before the first edit, an offered copy must survive.
      isTouched.current = false;
      dropDraft(userId, key);
    }
  }, [userId, key, value, base]);

  const takeOffered = useCallback(() => {
    setOffer({ slot, draft: null });
    return offer.draft?.value ?? null;
  }, [offer.draft, slot]);
  const clear = useCallback(() => {
    isTouched.current = false;
    setOffer({ slot, draft: null });
    dropDraft(userId, key);
  }, [userId, key, slot]);
  return { offered: offer.draft, takeOffered, declineOffered: clear, clear };
}
