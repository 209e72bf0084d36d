import { useState, type FormEvent } from 'react';
import { Link } from 'react-router-dom';
import { passwordResetRequest } from '../../../../shared/schemas/people';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { TextInput } from '../../../components/field';
import { Panel } from '../../../components/panel';
import { Notice } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { useRequestReset } from '../api/use-password-reset';
import { EntryLayout } from '../components/entry-layout';

export function Component() {
  usePageTitle('Reset password');
  const [email, setEmail] = useState('');
  const [issue, setIssue] = useState<string>();
  const request = useRequestReset();
  const onSubmit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = passwordResetRequest.safeParse({ email });
    setIssue(parsed.error?.issues[0]?.message);
    if (parsed.success) request.mutate(parsed.data.email);
  };
  return (
    <EntryLayout title="Reset your password" lead="We send a link to set a new one.">
      <Panel>
        {request.isSuccess ? (
          <div role="status">
            <Notice tone="verdigris" title="Look into your mail">
              If {email} belongs to an account, a link is on its way. It works once and for a limited time.
            </Notice>
          </div>
        ) : (
          <form noValidate onSubmit={onSubmit} className="space-y-4">
            <TextInput
              label="E-mail"
              type="email"
              autoComplete="username"
              autoFocus
              value={email}
              error={issue ?? issueFor(request.error, 'email')}
              onChange={(event) => setEmail(event.target.value)}
            />
            {request.isError ? <Notice tone="madder">{errorMessage(request.error)}</Notice> : null}
            <Button type="submit" variant="primary" isBusy={request.isPending}>
              Send link
            </Button>
          </form>
        )}
      </Panel>
      <p>
        <Link to={paths.signIn()} className="text-indigo">
          Back to sign-in
        </Link>
      </p>
    </EntryLayout>
  );
}
