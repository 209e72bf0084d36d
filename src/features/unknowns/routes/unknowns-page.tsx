import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { UNKNOWN_STATUSES, type UnknownStatus } from '../../../../shared/types/states';
import { Button } from '../../../components/button';
import { Select, type SelectOption } from '../../../components/field';
import { Pagination } from '../../../components/pagination';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { UNKNOWN_STATUS_LOOKS } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { classNames } from '../../../lib/class-names';
import { queryClient } from '../../../lib/query-client';
import { rememberTeam, useMe } from '../../../lib/session';
import { unknownListOptions } from '../api/unknowns';
import { NewUnknownButton } from '../components/new-unknown-button';
import { SearchField } from '../components/search-field';
import { UnknownTable } from '../components/unknown-table';
import { readUnknownFilter, useUnknownFilter } from '../hooks/use-unknown-filter';

/** Starts loading early; the page shows its own loading and error states, so nothing is awaited. */
export function loader({ params, request }: LoaderFunctionArgs) {
  void queryClient.prefetchQuery(unknownListOptions(params['teamId'] ?? '', readUnknownFilter(new URL(request.url).searchParams)));
  return null;
}

const STATUS_OPTIONS: ReadonlyArray<SelectOption<UnknownStatus | 'all'>> = [
  { value: 'all', label: 'Every status' },
  ...UNKNOWN_STATUSES.map((status) => ({ value: status, label: UNKNOWN_STATUS_LOOKS[status].word })),
];

export function Component() {
  const { teamId = '' } = useParams();
  const membership = useMe().memberships.find((candidate) => candidate.teamId === teamId);
  const [filter, setFilter] = useUnknownFilter();
  const list = useQuery(unknownListOptions(teamId, filter));
  usePageTitle('Unknowns');
  useEffect(() => {
    if (membership !== undefined) rememberTeam(teamId);
  }, [membership, teamId]);
  const canCreate = membership?.abilities.createUnknown === true;
  const isFiltered = filter.search !== '' || filter.status !== 'all';
  return (
    <>
      <PageHeader
        title="Unknowns"
        lead={<span className="hidden tablet:inline">{membership?.teamName}</span>}
        actions={canCreate ? <NewUnknownButton teamId={teamId} /> : undefined}
      />
      <div className="mb-3 flex flex-wrap gap-3">
        <SearchField
          label="Search code, title, formula"
          value={filter.search}
          onApply={(search) => setFilter({ search }, { replace: true })}
        />
        <Select
          label="Status"
          isLabelHidden
          className="w-full tablet:w-44"
          options={STATUS_OPTIONS}
          value={filter.status}
          onValueChange={(status) => setFilter({ status })}
        />
      </div>
      <Panel isFlush>
        {list.isPending ? (
          <LoadingState label="Loading unknowns" lines={8} />
        ) : list.isError ? (
          <ErrorState title="The unknowns could not be loaded" error={list.error} onRetry={() => void list.refetch()} />
        ) : list.data.rows.length === 0 && list.data.total > 0 ? (
          <EmptyState
            title="This page is past the end"
            action={<Button onClick={() => setFilter({ page: 1 })}>Go to the first page</Button>}
          />
        ) : list.data.total === 0 ? (
          isFiltered ? (
            <EmptyState
              title="Nothing fits"
              action={<Button onClick={() => setFilter({ search: '', status: 'all' })}>Show all unknowns</Button>}
            >
              No unknown of this team matches the search and the status.
            </EmptyState>
          ) : (
            <EmptyState title="No unknowns yet" action={canCreate ? <NewUnknownButton teamId={teamId} /> : undefined}>
              An unknown is one sample to be identified. Start with its molecular formula; fragments and signals can follow.
            </EmptyState>
          )
        ) : (
          <div className={classNames('transition-opacity', list.isPlaceholderData && 'opacity-60')}>
            <UnknownTable rows={list.data.rows} filter={filter} onSort={(sort, direction) => setFilter({ sort, direction })} />
            <div className="border-t border-seam px-3 py-1.5">
              <Pagination
                page={list.data.page}
                pageSize={list.data.pageSize}
                total={list.data.total}
                onPage={(page) => setFilter({ page })}
              />
            </div>
          </div>
        )}
      </Panel>
    </>
  );
}
