import { useQuery } from '@tanstack/react-query';
import { Pencil, UserPlus } from 'lucide-react';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button, ButtonLink } from '../../../components/button';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { usePageTitle } from '../../../components/use-page-title';
import { useCurrentTeam, useMe } from '../../../lib/session';
import { membersQuery, teamQuery, usageQuery, type Team } from '../api/team';
import { InvitationTable } from '../components/invitation-table';
import { InviteDialog } from '../components/invite-dialog';
import { MemberTable } from '../components/member-table';
import { RenameTeamDialog } from '../components/rename-team-dialog';
import { UsageTable } from '../components/usage-table';

/** Members, invitations and usage of the current team, or of the one in the address (for admins, who run every team). */
export function Component() {
  usePageTitle('Team');
  const me = useMe();
  const current = useCurrentTeam();
  const [search] = useSearchParams();
  const teamId = search.get('team') ?? current?.teamId;
  if (teamId === undefined) {
    return (
      <EmptyState
        isPage
        title="You are in no team yet"
        action={me.abilities.createTeam ? <ButtonLink to={paths.adminPeople()}>Create a team</ButtonLink> : undefined}
      >
        {me.abilities.createTeam
          ? 'Create a team and invite its members.'
          : 'Ask a lead for an invitation; unknowns, runs and fragments belong to a team.'}
      </EmptyState>
    );
  }
  return <TeamView key={teamId} teamId={teamId} />;
}

function TeamView({ teamId }: { teamId: string }) {
  const team = useQuery(teamQuery(teamId));
  if (team.isPending) return <LoadingState label="Loading the team" />;
  if (team.isError) return <ErrorState title="The team could not be loaded" error={team.error} onRetry={() => void team.refetch()} />;
  return <LoadedTeam team={team.data} />;
}

function LoadedTeam({ team }: { team: Team }) {
  const [open, setOpen] = useState<'invite' | 'rename' | null>(null);
  const { abilities } = team;
  return (
    <>
      <PageHeader
        title={team.name}
        actions={
          <>
            {abilities.update ? (
              <Button icon={<Pencil aria-hidden="true" className="size-4" />} onClick={() => setOpen('rename')}>
                Rename
              </Button>
            ) : null}
            {abilities.manageMembers ? (
              <Button variant="primary" icon={<UserPlus aria-hidden="true" className="size-4" />} onClick={() => setOpen('invite')}>
                Invite a member
              </Button>
            ) : null}
          </>
        }
      />
      <div className="space-y-6">
        <People teamId={team.id} />
        {abilities.readUsage ? <UsagePanel teamId={team.id} canSetQuotas={abilities.setQuotas} /> : null}
      </div>
      {open === 'invite' ? <InviteDialog teamId={team.id} onClose={() => setOpen(null)} /> : null}
      {open === 'rename' ? <RenameTeamDialog teamId={team.id} name={team.name} onClose={() => setOpen(null)} /> : null}
    </>
  );
}

function People({ teamId }: { teamId: string }) {
  const members = useQuery(membersQuery(teamId));
  return (
    <>
      <Panel title="Members" isFlush>
        {members.isPending ? (
          <LoadingState label="Loading members" />
        ) : members.isError ? (
          <ErrorState title="The members could not be loaded" error={members.error} onRetry={() => void members.refetch()} />
        ) : members.data.members.length === 0 ? (
          <EmptyState title="No members yet">Invite the first one; a lead can then invite the others.</EmptyState>
        ) : (
          <MemberTable teamId={teamId} members={members.data.members} />
        )}
      </Panel>
      {members.data !== undefined && members.data.invitations.length > 0 ? (
        <Panel title="Open invitations" isFlush>
          <InvitationTable teamId={teamId} invitations={members.data.invitations} />
        </Panel>
      ) : null}
    </>
  );
}

const monthName = (month: string) =>
  new Intl.DateTimeFormat('en-GB', { month: 'long', year: 'numeric', timeZone: 'UTC' }).format(
    new Date(`${month.slice(0, 7)}-01T00:00:00Z`),
  );

function UsagePanel({ teamId, canSetQuotas }: { teamId: string; canSetQuotas: boolean }) {
  const usage = useQuery(usageQuery(teamId));
  return (
    <Panel title={usage.data === undefined ? 'Usage and quotas' : `Usage and quotas, ${monthName(usage.data.month)}`} isFlush>
      {usage.isPending ? (
        <LoadingState label="Loading usage" />
      ) : usage.isError ? (
        <ErrorState title="The usage could not be loaded" error={usage.error} onRetry={() => void usage.refetch()} />
      ) : usage.data.people.length === 0 ? (
        <EmptyState title="Nobody to count yet" />
      ) : (
        <UsageTable teamId={teamId} people={usage.data.people} canSetQuotas={canSetQuotas} />
      )}
    </Panel>
  );
}
