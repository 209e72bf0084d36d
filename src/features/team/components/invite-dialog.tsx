import { useId, useState, type FormEvent } from 'react';
import { inviteRequest } from '../../../../shared/schemas/people';
import type { TeamRole } from '../../../../shared/types/roles';
import { Button } from '../../../components/button';
import { CopyButton } from '../../../components/copy-button';
import { Dialog } from '../../../components/dialog';
import { Select, TextInput } from '../../../components/field';
import { Notice } from '../../../components/status-word';
import { Time } from '../../../components/time';
import { ApiError, errorMessage, issueFor } from '../../../lib/api-error';
import { useInvite } from '../api/team';
import { ROLE_LINES, ROLE_OPTIONS } from './role-options';

/** Invites by e-mail, then shows the link, because mail may not be set up. */
export function InviteDialog({ teamId, onClose }: { teamId: string; onClose: () => void }) {
  const formId = useId();
  const [email, setEmail] = useState('');
  const [role, setRole] = useState<TeamRole>('chemist');
  const [issue, setIssue] = useState<string>();
  const invite = useInvite(teamId);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = inviteRequest.safeParse({ email, role });
    setIssue(parsed.error?.issues[0]?.message);
    if (parsed.success) invite.mutate(parsed.data);
  };
  if (invite.isSuccess) {
    const { invitation, link } = invite.data;
    return (
      <Dialog
        title="Invitation sent"
        onClose={onClose}
        footer={
          <Button variant="primary" onClick={onClose}>
            Done
          </Button>
        }
      >
        <p>
          A mail to {invitation.email} is on its way. You can also hand over this link; it works once, until{' '}
          <Time iso={invitation.expiresAt} />.
        </p>
        <div className="mt-3 flex items-start gap-2">
          <code className="min-w-0 flex-1 rounded-panel border border-seam bg-linen px-3 py-2 font-mono text-small break-all">{link}</code>
          <CopyButton text={link} label="Copy link" />
        </div>
      </Dialog>
    );
  }
  return (
    <Dialog
      title="Invite a member"
      width="narrow"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form={formId} variant="primary" isBusy={invite.isPending}>
            Invite
          </Button>
        </>
      }
    >
      <form id={formId} noValidate onSubmit={submit} className="space-y-4">
        <TextInput
          label="E-mail"
          type="email"
          autoComplete="off"
          autoFocus
          value={email}
          error={issue ?? issueFor(invite.error, 'email')}
          onChange={(event) => setEmail(event.target.value)}
        />
        <Select label="Role" options={ROLE_OPTIONS} value={role} hint={ROLE_LINES[role]} onValueChange={setRole} />
        {invite.error instanceof ApiError && invite.error.issues.length > 0 ? null : invite.isError ? (
          <Notice tone="madder">{errorMessage(invite.error)}</Notice>
        ) : null}
      </form>
    </Dialog>
  );
}
