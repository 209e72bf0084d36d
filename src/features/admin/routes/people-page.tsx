import { useQuery } from '@tanstack/react-query';
import { Plus } from 'lucide-react';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { Badge } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { useMe } from '../../../lib/session';
import { peopleQuery, teamsQuery } from '../api/installation';
import { AdminOnly } from '../components/admin-only';
import { CreateTeamDialog } from '../components/create-team-dialog';
import { PeopleTable } from '../components/people-table';

export function Component() {
  usePageTitle('People of the installation');
  return (
    <AdminOnly isAllowed={useMe().abilities.manageUsers}>
      <Page />
    </AdminOnly>
  );
}

function Page() {
  const canCreateTeam = useMe().abilities.createTeam;
  const [isCreating, setIsCreating] = useState(false);
  const people = useQuery(peopleQuery);
  return (
    <>
      <PageHeader
        title="People of the installation"
        lead="People join a team by invitation; open the team to invite."
        actions={
          canCreateTeam ? (
            <Button variant="primary" icon={<Plus aria-hidden="true" className="size-4" />} onClick={() => setIsCreating(true)}>
              New team
            </Button>
          ) : undefined
        }
      />
      <div className="grid gap-6 wide:grid-cols-[280px_minmax(0,1fr)]">
        <Teams />
        <Panel title="People" isFlush>
          {people.isPending ? (
            <LoadingState label="Loading people" />
          ) : people.isError ? (
            <ErrorState title="The people could not be loaded" error={people.error} onRetry={() => void people.refetch()} />
          ) : (
            <PeopleTable people={people.data.users} />
          )}
        </Panel>
      </div>
      {isCreating ? <CreateTeamDialog onClose={() => setIsCreating(false)} /> : null}
    </>
  );
}

function Teams() {
  const teams = useQuery(teamsQuery);
  return (
    <Panel title="Teams" isFlush className="self-start">
      {teams.isPending ? (
        <LoadingState label="Loading teams" lines={3} />
      ) : teams.isError ? (
        <ErrorState title="The teams could not be loaded" error={teams.error} onRetry={() => void teams.refetch()} />
      ) : teams.data.teams.length === 0 ? (
        <EmptyState title="No team yet">Unknowns, runs and fragments belong to a team. Create the first one.</EmptyState>
      ) : (
        <ul className="divide-y divide-seam">
          {teams.data.teams.map((team) => (
            <li key={team.id}>
              <Link
                to={paths.team(team.id)}
                className="flex items-center justify-between gap-2 px-4 py-2 text-ink no-underline hover:bg-fold hover:text-indigo focus-visible:-outline-offset-2"
              >
                <span className="min-w-0 truncate">{team.name}</span>
                {team.isDemo ? <Badge tone="weld">Invented data</Badge> : null}
              </Link>
            </li>
          ))}
        </ul>
      )}
    </Panel>
  );
}
