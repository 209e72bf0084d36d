import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useRevalidator } from 'react-router-dom';
import { Dialog } from '../components/dialog';
import { SignInForm } from '../features/session/components/sign-in-form';
import { onSessionExpired } from '../lib/session-events';
import { useMe, type Me } from '../lib/session';

/** Asks to sign in again over the page that was open, so that what was typed there stays. */
export function SessionExpiredDialog() {
  const me = useMe();
  const queryClient = useQueryClient();
  const revalidator = useRevalidator();
  const [isExpired, setIsExpired] = useState(false);
  useEffect(() => onSessionExpired(() => setIsExpired(true)), []);
  if (!isExpired) return null;
  const onSignedIn = (signedIn: Me) => {
    if (signedIn.user.id !== me.user.id) {
      // Somebody else: nothing of the page belongs to them.
      window.location.assign('/');
      return;
    }
    setIsExpired(false);
    void queryClient.invalidateQueries();
    void revalidator.revalidate();
  };
  return (
    <Dialog title="Sign in again" width="narrow">
      <p className="mb-4">Your session has ended. What you edited is kept in this browser; sign in and continue where you were.</p>
      <SignInForm
        fixedEmail={me.user.email}
        onSignedIn={onSignedIn}
        aside={
          <a href="/sign-in" className="text-table text-indigo">
            Sign in as somebody else
          </a>
        }
      />
    </Dialog>
  );
}
