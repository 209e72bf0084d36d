import { useState, type FormEvent } from 'react';
import { Link, useParams } from 'react-router-dom';
import { setPasswordRequest } from '../../../../shared/schemas/people';
import { paths } from '../../../app/paths';
import { Button, ButtonLink } from '../../../components/button';
import { Panel } from '../../../components/panel';
import { Notice } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { useResetPassword } from '../api/use-password-reset';
import { EntryLayout } from '../components/entry-layout';
import { NewPasswordField } from '../components/new-password-field';

export function Component() {
  usePageTitle('Set a new password');
  const { token = '' } = useParams();
  const [password, setPassword] = useState('');
  const [issue, setIssue] = useState<string>();
  const reset = useResetPassword(token);
  const onSubmit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = setPasswordRequest.safeParse({ password });
    setIssue(parsed.error?.issues[0]?.message);
    if (parsed.success) reset.mutate(password);
  };
  if (reset.isSuccess) {
    return (
      <EntryLayout title="The new password is set" lead="All sessions of this account were ended. Sign in with the new password.">
        <ButtonLink to={paths.signIn()} variant="primary">
          Sign in
        </ButtonLink>
      </EntryLayout>
    );
  }
  return (
    <EntryLayout title="Set a new password" lead="Afterwards every open session of this account ends.">
      <Panel>
        <form noValidate onSubmit={onSubmit} className="space-y-4">
          <NewPasswordField value={password} onValueChange={setPassword} error={issue ?? issueFor(reset.error, 'password')} />
          {reset.isError ? (
            <Notice tone="madder">
              {errorMessage(reset.error)} <Link to={paths.requestReset()}>Ask for a new link</Link>
            </Notice>
          ) : null}
          <Button type="submit" variant="primary" isBusy={reset.isPending}>
            Set password
          </Button>
        </form>
      </Panel>
    </EntryLayout>
  );
}
