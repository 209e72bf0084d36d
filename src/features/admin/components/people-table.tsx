import { useState } from 'react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { Badge } from '../../../components/status-word';
import { Email } from '../../../components/email';
import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import { errorMessage } from '../../../lib/api-error';
import { useUpdatePerson, type Person } from '../api/installation';

type Change = 'disable' | 'enable' | 'makeAdmin' | 'takeAdmin';

const QUESTIONS: Record<
  Change,
  { title: (name: string) => string; text: string; verb: string; isDestructive: boolean; body: { isAdmin?: boolean; isDisabled?: boolean } }
> = {
  disable: {
    title: (name) => `Disable ${name}?`,
    text: 'Open sessions end and signing in is refused. What the person entered stays.',
    verb: 'Disable',
    isDestructive: true,
    body: { isDisabled: true },
  },
  enable: {
    title: (name) => `Enable ${name}?`,
    text: 'The person can sign in again, with the roles kept from before.',
    verb: 'Enable',
    isDestructive: false,
    body: { isDisabled: false },
  },
  makeAdmin: {
    title: (name) => `Make ${name} an admin?`,
    text: 'Admins manage people, teams, quotas and audit of the whole installation.',
    verb: 'Make admin',
    isDestructive: false,
    body: { isAdmin: true },
  },
  takeAdmin: {
    title: (name) => `Take admin from ${name}?`,
    text: 'The person keeps the roles in teams.',
    verb: 'Take admin',
    isDestructive: true,
    body: { isAdmin: false },
  },
};

export function PeopleTable({ people }: { people: readonly Person[] }) {
  const [asked, setAsked] = useState<{ person: Person; change: Change } | null>(null);
  const update = useUpdatePerson();
  const ask = (person: Person, change: Change) => {
    update.reset();
    setAsked({ person, change });
  };
  const question = asked === null ? null : QUESTIONS[asked.change];
  return (
    <>
      <Table
        caption="People"
        head={
          <>
            <HeaderCell>Name</HeaderCell>
            <HeaderCell>Teams</HeaderCell>
            <HeaderCell className="hidden tablet:table-cell">Since</HeaderCell>
            <HeaderCell>
              <span className="sr-only">Actions</span>
            </HeaderCell>
          </>
        }
      >
        {people.map((person) => (
          <Row key={person.id}>
            <Cell className="py-1.5">
              <span className="flex flex-wrap items-center gap-x-2">
                <span className="font-semibold">{person.name}</span>
                {person.isAdmin ? <Badge tone="indigo">admin</Badge> : null}
                {person.isDisabled ? <Badge tone="madder">disabled</Badge> : null}
              </span>
              <span className="block wrap-anywhere text-faded">
                <Email address={person.email} />
              </span>
            </Cell>
            <Cell>
              {person.teams.length === 0 ? (
                <span className="text-faded">none</span>
              ) : (
                <ul>
                  {person.teams.map((team) => (
                    <li key={team.teamId}>
                      <Link to={paths.team(team.teamId)} className="text-indigo">
                        {team.teamName}
                      </Link>{' '}
                      <span className="text-faded">{team.role}</span>
                    </li>
                  ))}
                </ul>
              )}
            </Cell>
            <Cell className="hidden text-faded tablet:table-cell">
              <Time iso={person.createdAt} isDayOnly />
            </Cell>
            <Cell align="right">
              {person.abilities.update ? (
                <span className="inline-flex flex-wrap justify-end gap-1">
                  <Button
                    size="small"
                    variant="quiet"
                    aria-label={person.isAdmin ? `Take admin from ${person.name}` : `Make ${person.name} an admin`}
                    onClick={() => ask(person, person.isAdmin ? 'takeAdmin' : 'makeAdmin')}
                  >
                    {person.isAdmin ? 'Take admin' : 'Make admin'}
                  </Button>
                  <Button
                    size="small"
                    variant="quiet"
                    aria-label={`${person.isDisabled ? 'Enable' : 'Disable'} ${person.name}`}
                    onClick={() => ask(person, person.isDisabled ? 'enable' : 'disable')}
                  >
                    {person.isDisabled ? 'Enable' : 'Disable'}
                  </Button>
                </span>
              ) : null}
            </Cell>
          </Row>
        ))}
      </Table>
      {asked === null || question === null ? null : (
        <ConfirmDialog
          title={question.title(asked.person.name)}
          confirmLabel={question.verb}
          isDestructive={question.isDestructive}
          isBusy={update.isPending}
          error={update.isError ? errorMessage(update.error) : undefined}
          onCancel={() => setAsked(null)}
          onConfirm={() => update.mutate({ userId: asked.person.id, ...question.body }, { onSuccess: () => setAsked(null) })}
        >
          {question.text}
        </ConfirmDialog>
      )}
    </>
  );
}
