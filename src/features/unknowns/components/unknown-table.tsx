import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Formula } from '../../../components/chemistry-text';
import { FunnelMini } from '../../../components/funnel/funnel-mini';
import { RunStatusWord, UnknownStatusWord } from '../../../components/status-word';
import { Cell, HeaderCell, Row, SortHeaderCell, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import { formatCount } from '../../../lib/numbers';
import type { UnknownRow } from '../../../lib/unknown-queries';
import type { UnknownFilter } from '../api/unknowns';

interface UnknownTableProps {
  rows: readonly UnknownRow[];
  filter: UnknownFilter;
  onSort: (sort: UnknownFilter['sort'], direction: UnknownFilter['direction']) => void;
}

function LastRun({ run }: { run: UnknownRow['lastRun'] }) {
  if (run === null) return <span className="text-faded">No run yet</span>;
  if (run.funnel === null) return <RunStatusWord status={run.status} />;
  return (
    <span className="flex items-start gap-3">
      <FunnelMini funnel={run.funnel} isIncomplete={run.status !== 'finished'} />
      {run.status === 'finished' && run.survivorCount !== null ? (
        <span>{formatCount(run.survivorCount)} ranked</span>
      ) : (
        <RunStatusWord status={run.status} />
      )}
    </span>
  );
}

/** Unknowns of a team; on a phone the columns fold under the title. */
export function UnknownTable({ rows, filter, onSort }: UnknownTableProps) {
  const sorting = { sort: { column: filter.sort, direction: filter.direction }, onSort };
  return (
    <Table
      caption="Unknowns"
      head={
        <>
          <SortHeaderCell column="code" {...sorting}>
            Code
          </SortHeaderCell>
          <SortHeaderCell column="title" {...sorting}>
            Title
          </SortHeaderCell>
          <SortHeaderCell column="formula" {...sorting} className="hidden tablet:table-cell">
            Formula
          </SortHeaderCell>
          <SortHeaderCell column="status" {...sorting} className="hidden tablet:table-cell">
            Status
          </SortHeaderCell>
          <HeaderCell className="hidden desk:table-cell">Last run</HeaderCell>
          <SortHeaderCell column="updatedAt" {...sorting} className="hidden tablet:table-cell">
            Changed
          </SortHeaderCell>
        </>
      }
    >
      {rows.map((row) => (
        <Row key={row.id} className="relative">
          <Cell className="py-2 align-top font-mono text-small whitespace-nowrap text-faded tablet:align-middle">{row.code}</Cell>
          <Cell className="w-full py-2 tablet:w-auto">
            {/* The link covers its row: one target, one stop for the keyboard. */}
            <Link
              to={paths.unknown(row.id)}
              className="block max-w-[46ch] font-semibold text-ink no-underline after:absolute after:inset-0 hover:text-indigo focus-visible:outline-none focus-visible:after:outline-2 focus-visible:after:-outline-offset-2 focus-visible:after:outline-indigo"
            >
              {row.title}
            </Link>
            <span className="mt-1 flex flex-wrap items-center gap-x-3 gap-y-1 text-faded tablet:hidden">
              {row.formula === null ? 'No formula yet' : <Formula formula={row.formula} className="text-ink" />}
              <UnknownStatusWord status={row.status} />
            </span>
            <span className="mt-1 block tablet:hidden">
              <LastRun run={row.lastRun} />
            </span>
          </Cell>
          <Cell className="hidden tablet:table-cell">
            {row.formula === null ? <span className="text-faded">–</span> : <Formula formula={row.formula} />}
          </Cell>
          <Cell className="hidden tablet:table-cell">
            <UnknownStatusWord status={row.status} />
          </Cell>
          <Cell className="hidden desk:table-cell">
            <LastRun run={row.lastRun} />
          </Cell>
          <Cell className="hidden text-faded tablet:table-cell">
            <Time iso={row.updatedAt} />
          </Cell>
        </Row>
      ))}
    </Table>
  );
}
