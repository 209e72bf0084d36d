import { useState, type FormEvent, type ReactNode } from 'react';
import { signInRequest } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { TextInput } from '../../../components/field';
import { Notice } from '../../../components/status-word';
import { errorMessage, issueFor } from '../../../lib/api-error';
import type { Me } from '../../../lib/session';
import { useSignIn } from '../api/use-sign-in';

interface SignInFormProps {
  /** Given when somebody signs in again: the address stays. */
  fixedEmail?: string;
  onSignedIn: (me: Me) => void;
  /** Beside the button. */
  aside?: ReactNode;
  /** Values put in from outside, for instance by a demo account. */
  initial?: { email: string; password: string };
}

export function SignInForm({ fixedEmail, onSignedIn, aside, initial }: SignInFormProps) {
  const signIn = useSignIn();
  const [email, setEmail] = useState(fixedEmail ?? initial?.email ?? '');
  const [password, setPassword] = useState(initial?.password ?? '');
  const [issues, setIssues] = useState<Readonly<Record<string, string>>>({});
  const onSubmit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = signInRequest.safeParse({ email, password });
    if (!parsed.success) {
      setIssues(Object.fromEntries(parsed.error.issues.map((issue) => [String(issue.path[0]), issue.message])));
      return;
    }
    setIssues({});
    signIn.mutate(parsed.data, { onSuccess: onSignedIn });
  };
  return (
    <form noValidate onSubmit={onSubmit} className="space-y-4">
      <TextInput
        label="E-mail"
        type="email"
        autoComplete="username"
        value={email}
        readOnly={fixedEmail !== undefined}
        autoFocus={fixedEmail === undefined}
        error={issues['email'] ?? issueFor(signIn.error, 'email')}
        onChange={(event) => setEmail(event.target.value)}
      />
      <TextInput
        label="Password"
        type="password"
        autoComplete="current-password"
        autoFocus={fixedEmail !== undefined}
        value={password}
        error={issues['password'] ?? issueFor(signIn.error, 'password')}
        onChange={(event) => setPassword(event.target.value)}
      />
      {signIn.isError ? (
        <div role="alert">
          <Notice tone="madder">{errorMessage(signIn.error)}</Notice>
        </div>
      ) : null}
      <div className="flex flex-wrap items-center justify-between gap-3">
        <Button type="submit" variant="primary" isBusy={signIn.isPending}>
          Sign in
        </Button>
        {aside}
      </div>
    </form>
  );
}
