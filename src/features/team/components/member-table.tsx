import { UserMinus } from 'lucide-react';
import { useState } from 'react';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { Select } from '../../../components/field';
import { IconButton } from '../../../components/icon-button';
import { Email } from '../../../components/email';
import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import { errorMessage } from '../../../lib/api-error';
import { useChangeRole, useRemoveMember, type Member } from '../api/team';
import { ROLE_OPTIONS, roleLabel } from './role-options';

export function MemberTable({ teamId, members }: { teamId: string; members: readonly Member[] }) {
  const [leaving, setLeaving] = useState<Member | null>(null);
  const changeRole = useChangeRole(teamId);
  const remove = useRemoveMember(teamId);
  return (
    <>
      <Table
        caption="Members"
        head={
          <>
            <HeaderCell>Name</HeaderCell>
            <HeaderCell className="hidden tablet:table-cell">E-mail</HeaderCell>
            <HeaderCell>Role</HeaderCell>
            <HeaderCell className="hidden tablet:table-cell">Joined</HeaderCell>
            <HeaderCell>
              <span className="sr-only">Actions</span>
            </HeaderCell>
          </>
        }
      >
        {members.map((member) => (
          <Row key={member.userId}>
            <Cell>
              <span className="font-semibold">{member.name}</span>
              <span className="block text-small wrap-anywhere text-faded tablet:hidden">
                <Email address={member.email} />
              </span>
            </Cell>
            <Cell className="hidden text-faded tablet:table-cell">
              <Email address={member.email} />
            </Cell>
            <Cell>
              {member.abilities.changeRole ? (
                <Select
                  label={`Role of ${member.name}`}
                  isLabelHidden
                  className="w-28"
                  controlClassName="min-h-7 py-0 text-table"
                  options={ROLE_OPTIONS}
                  value={changeRole.isPending && changeRole.variables.userId === member.userId ? changeRole.variables.role : member.role}
                  disabled={changeRole.isPending}
                  onValueChange={(role) => changeRole.mutate({ userId: member.userId, role })}
                />
              ) : (
                roleLabel(member.role)
              )}
            </Cell>
            <Cell className="hidden text-faded tablet:table-cell">
              <Time iso={member.joinedAt} isDayOnly />
            </Cell>
            <Cell align="right">
              {member.abilities.remove ? (
                <IconButton
                  label={`Remove ${member.name}`}
                  tone="danger"
                  icon={<UserMinus className="size-4" />}
                  onClick={() => {
                    remove.reset();
                    setLeaving(member);
                  }}
                />
              ) : null}
            </Cell>
          </Row>
        ))}
      </Table>
      {leaving === null ? null : (
        <ConfirmDialog
          title={`Remove ${leaving.name}?`}
          confirmLabel="Remove member"
          isDestructive
          isBusy={remove.isPending}
          error={remove.isError ? errorMessage(remove.error) : undefined}
          onCancel={() => setLeaving(null)}
          onConfirm={() => remove.mutate(leaving.userId, { onSuccess: () => setLeaving(null) })}
        >
          {leaving.name} no longer sees anything of this team. What they entered stays, with their name.
        </ConfirmDialog>
      )}
    </>
  );
}
