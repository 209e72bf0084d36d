import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { RUN_STATUSES } from '../../../../shared/types/states';
import { paths } from '../../../app/paths';
import { ButtonLink } from '../../../components/button';
import { Select, type SelectOption } from '../../../components/field';
import { Pagination } from '../../../components/pagination';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { RUN_STATUS_LOOKS } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { RUNS_PAGE_SIZE, teamRunsQuery, type TeamRunFilter } from '../../../lib/queries/run-queries';
import { useCurrentTeam } from '../../../lib/session';
import { RunsTable } from '../components/runs-table';

const STATUS_OPTIONS: ReadonlyArray<SelectOption<TeamRunFilter['status']>> = [
  { value: 'all', label: 'All states' },
  ...RUN_STATUSES.map((status) => ({ value: status, label: RUN_STATUS_LOOKS[status].word })),
];

function readFilter(search: URLSearchParams): TeamRunFilter {
  const status = RUN_STATUSES.find((known) => known === search.get('status')) ?? 'all';
  const page = Number(search.get('page') ?? '1');
  return { status, page: Number.isInteger(page) && page >= 1 ? page : 1 };
}

/** Every run of the team, newest first. */
export function Component() {
  usePageTitle('Runs');
  const team = useCurrentTeam();
  if (team === null) return <EmptyState title="No team yet">Runs belong to a team. Ask a lead or an admin for an invitation.</EmptyState>;
  return <TeamRuns key={team.teamId} teamId={team.teamId} />;
}

function TeamRuns({ teamId }: { teamId: string }) {
  const [search, setSearch] = useSearchParams();
  const filter = readFilter(search);
  const { data, error, refetch } = useQuery(teamRunsQuery(teamId, filter));
  const change = (next: TeamRunFilter) =>
    setSearch({ ...(next.status === 'all' ? {} : { status: next.status }), ...(next.page === 1 ? {} : { page: String(next.page) }) });
  const isEmpty = data !== undefined && data.rows.length === 0;
  return (
    <>
      <PageHeader
        title="Runs"
        lead="Every search of the team, newest first."
        actions={
          <Select
            label="State"
            isLabelHidden
            options={STATUS_OPTIONS}
            value={filter.status}
            onChange={(event) =>
              change({ status: STATUS_OPTIONS.find((option) => option.value === event.target.value)?.value ?? 'all', page: 1 })
            }
          />
        }
      />
      <Panel isFlush>
        {data === undefined ? (
          error === null ? (
            <LoadingState label="Loading runs" lines={8} />
          ) : (
            <ErrorState error={error} onRetry={() => void refetch()} />
          )
        ) : isEmpty ? (
          filter.status === 'all' && filter.page === 1 ? (
            <EmptyState title="No runs yet" action={<ButtonLink to={paths.unknowns(teamId)}>Open the unknowns</ButtonLink>}>
              Runs are started from an unknown, once its formula is saved. They will be listed here with their state and counts.
            </EmptyState>
          ) : (
            <EmptyState title="No run in this state">Choose another state to see more.</EmptyState>
          )
        ) : (
          <RunsTable runs={data.rows} caption="Runs of the team" hasUnknown />
        )}
      </Panel>
      {data === undefined || data.total <= RUNS_PAGE_SIZE ? null : (
        <Pagination page={filter.page} pageSize={RUNS_PAGE_SIZE} total={data.total} onPage={(page) => change({ ...filter, page })} />
      )}
    </>
  );
}
