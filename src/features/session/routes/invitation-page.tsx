import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { invitationAcceptRequest } from '../../../../shared/schemas/people';
import { paths } from '../../../app/paths';
import { Button, ButtonLink } from '../../../components/button';
import { TextInput } from '../../../components/field';
import { Panel } from '../../../components/panel';
import { LoadingState } from '../../../components/states';
import { Notice } from '../../../components/status-word';
import { Time } from '../../../components/time';
import { usePageTitle } from '../../../components/use-page-title';
import type { EndpointResponse } from '../../../lib/api-client';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { rememberTeam } from '../../../lib/session';
import { invitationQuery, useAcceptInvitation } from '../api/invitation';
import { EntryLayout } from '../components/entry-layout';
import { NewPasswordField } from '../components/new-password-field';

export function Component() {
  usePageTitle('Invitation');
  const { token = '' } = useParams();
  const invitation = useQuery(invitationQuery(token));
  if (invitation.isPending) {
    return (
      <EntryLayout title="Invitation">
        <LoadingState label="Reading the invitation" lines={3} />
      </EntryLayout>
    );
  }
  if (invitation.isError) {
    return (
      <EntryLayout title="This invitation cannot be used">
        <Notice tone="madder">{errorMessage(invitation.error)}</Notice>
        <p className="text-faded">Links work once and for a limited time. Ask the person who invited you for a new one.</p>
        <ButtonLink to={paths.signIn()}>Go to sign-in</ButtonLink>
      </EntryLayout>
    );
  }
  return <AcceptForm token={token} invitation={invitation.data} />;
}

function AcceptForm({ token, invitation }: { token: string; invitation: EndpointResponse<'readInvitation'> }) {
  const navigate = useNavigate();
  const accept = useAcceptInvitation(token);
  const [name, setName] = useState('');
  const [password, setPassword] = useState('');
  const [issues, setIssues] = useState<Readonly<Record<string, string>>>({});
  const onSubmit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = invitationAcceptRequest.safeParse({ name: invitation.needsAccount ? name : invitation.email, password });
    setIssues(Object.fromEntries((parsed.error?.issues ?? []).map((issue) => [String(issue.path[0]), issue.message])));
    if (!parsed.success) return;
    accept.mutate(parsed.data, {
      onSuccess: (me) => {
        const joined = me.memberships.find((membership) => membership.teamName === invitation.teamName);
        if (joined !== undefined) rememberTeam(joined.teamId);
        void navigate(paths.home(), { replace: true });
      },
    });
  };
  return (
    <EntryLayout title={`Join ${invitation.teamName}`} lead={`${invitation.invitedBy} invites you as ${invitation.role}.`}>
      <Panel>
        <form noValidate onSubmit={onSubmit} className="space-y-4">
          <TextInput label="E-mail" type="email" autoComplete="username" value={invitation.email} readOnly />
          {invitation.needsAccount ? (
            <>
              <TextInput
                label="Your name"
                autoComplete="name"
                autoFocus
                value={name}
                error={issues['name'] ?? issueFor(accept.error, 'name')}
                onChange={(event) => setName(event.target.value)}
              />
              <NewPasswordField
                value={password}
                onValueChange={setPassword}
                error={issues['password'] ?? issueFor(accept.error, 'password')}
              />
            </>
          ) : (
            <TextInput
              label="Your password"
              type="password"
              autoComplete="current-password"
              autoFocus
              hint="You have an account already: confirm with its password."
              value={password}
              error={issues['password'] ?? issueFor(accept.error, 'password')}
              onChange={(event) => setPassword(event.target.value)}
            />
          )}
          {accept.isError ? <Notice tone="madder">{errorMessage(accept.error)}</Notice> : null}
          <Button type="submit" variant="primary" isBusy={accept.isPending}>
            Join the team
          </Button>
        </form>
      </Panel>
      <p className="text-table text-faded">
        The invitation is good until <Time iso={invitation.expiresAt} />.
      </p>
    </EntryLayout>
  );
}
