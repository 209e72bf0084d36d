import { X } from 'lucide-react';
import { IconButton } from '../../../components/icon-button';
import { Email } from '../../../components/email';
import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import { useRevokeInvitation, type Invitation } from '../api/team';
import { roleLabel } from './role-options';

/** Invitations nobody has accepted yet. */
export function InvitationTable({ teamId, invitations }: { teamId: string; invitations: readonly Invitation[] }) {
  const revoke = useRevokeInvitation(teamId);
  return (
    <Table
      caption="Open invitations"
      head={
        <>
          <HeaderCell>E-mail</HeaderCell>
          <HeaderCell>Role</HeaderCell>
          <HeaderCell className="hidden tablet:table-cell">Invited by</HeaderCell>
          <HeaderCell>Good until</HeaderCell>
          <HeaderCell>
            <span className="sr-only">Actions</span>
          </HeaderCell>
        </>
      }
    >
      {invitations.map((invitation) => (
        <Row key={invitation.id}>
          <Cell className="wrap-anywhere">
            <Email address={invitation.email} />
          </Cell>
          <Cell>{roleLabel(invitation.role)}</Cell>
          <Cell className="hidden text-faded tablet:table-cell">{invitation.invitedBy}</Cell>
          <Cell className="text-faded">
            <Time iso={invitation.expiresAt} isDayOnly />
          </Cell>
          <Cell align="right">
            {invitation.abilities.revoke ? (
              <IconButton
                label={`Withdraw the invitation of ${invitation.email}`}
                tone="danger"
                icon={<X className="size-4" />}
                disabled={revoke.isPending}
                onClick={() => revoke.mutate(invitation.id)}
              />
            ) : null}
          </Cell>
        </Row>
      ))}
    </Table>
  );
}
