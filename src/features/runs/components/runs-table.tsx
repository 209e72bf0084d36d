import { TriangleAlert } from 'lucide-react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Formula } from '../../../components/chemistry-text';
import { FunnelMini } from '../../../components/funnel/funnel-mini';
import { Badge, RunStatusWord } from '../../../components/status-word';
import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import { useMediaQuery } from '../hooks/use-media-query';
import { isEnded, type Run } from '../../../lib/queries/run-queries';

/** Figures of a run, live ones while it is going on. */
function runFigures(run: Run) {
  return {
    constitutions: run.constitutionCount ?? run.progress?.constitutionsSeen ?? null,
    survivors: run.survivorCount ?? run.progress?.survivors ?? null,
    seconds:
      run.startedAt === null
        ? null
        : run.finishedAt === null
          ? (run.progress?.elapsedSeconds ?? null)
          : (Date.parse(run.finishedAt) - Date.parse(run.startedAt)) / 1000,
  };
}
const count = (value: number | null) => (value === null ? '–' : formatCount(value));
export const isIncompleteRun = (run: Run) => isEnded(run) && !run.complete;

function RunState({ run }: { run: Run }) {
  return (
    <span className="inline-flex flex-wrap items-center gap-x-2">
      <RunStatusWord status={run.status} />
      {isIncompleteRun(run) && run.status !== 'failed' ? (
        <Badge tone="weld">
          <TriangleAlert aria-hidden="true" className="size-3.5" />
          Incomplete
        </Badge>
      ) : null}
    </span>
  );
}

interface RunsTableProps {
  runs: readonly Run[];
  caption: string;
  /** Lists over several unknowns say which one a run belongs to. */
  hasUnknown?: boolean;
}

/** Runs as a table; on a phone as stacked entries. */
export function RunsTable({ runs, caption, hasUnknown = false }: RunsTableProps) {
  const isPhone = useMediaQuery('(width < 720px)');
  if (isPhone) {
    return (
      <ul aria-label={caption} className="divide-y divide-seam">
        {runs.map((run) => (
          <RunEntry key={run.id} run={run} hasUnknown={hasUnknown} />
        ))}
      </ul>
    );
  }
  return (
    <Table
      caption={caption}
      head={
        <>
          <HeaderCell>Run</HeaderCell>
          {hasUnknown ? <HeaderCell>Unknown</HeaderCell> : null}
          <HeaderCell>State</HeaderCell>
          <HeaderCell>Threads</HeaderCell>
          <HeaderCell align="right">Constitutions</HeaderCell>
          <HeaderCell align="right">Survive</HeaderCell>
          <HeaderCell align="right">Time</HeaderCell>
          <HeaderCell>Evidence</HeaderCell>
          <HeaderCell>Started</HeaderCell>
        </>
      }
    >
      {runs.map((run) => {
        const { constitutions, survivors, seconds } = runFigures(run);
        return (
          <Row key={run.id} className="relative">
            <Cell className="font-semibold whitespace-nowrap">
              <Link to={paths.run(run.id)} className="text-indigo no-underline after:absolute after:inset-0 hover:underline">
                Run {run.number}
              </Link>
            </Cell>
            {hasUnknown ? (
              <Cell className="max-w-[240px]">
                <UnknownLink run={run} />
              </Cell>
            ) : null}
            <Cell>
              <RunState run={run} />
            </Cell>
            <Cell className="py-0">
              <FunnelMini
                funnel={run.funnel}
                progress={run.progress}
                isIncomplete={isIncompleteRun(run)}
                {...(isEnded(run) ? { keptCount: run.keptCount } : {})}
              />
            </Cell>
            <Cell align="right" className="whitespace-nowrap">
              {count(constitutions)}
            </Cell>
            <Cell align="right" className="whitespace-nowrap">
              {count(survivors)}
            </Cell>
            <Cell align="right" className="whitespace-nowrap">
              {seconds === null ? '–' : formatSeconds(Math.max(0, seconds))}
            </Cell>
            <Cell className="whitespace-nowrap">
              <Formula formula={run.formula} /> <span className="text-faded">rev. {run.revisionNumber}</span>
            </Cell>
            <Cell className="whitespace-nowrap">
              <Time iso={run.createdAt} /> <span className="text-faded">{run.startedBy.name}</span>
            </Cell>
          </Row>
        );
      })}
    </Table>
  );
}

function UnknownLink({ run }: { run: Run }) {
  return (
    <span className="block truncate">
      <Link to={paths.unknown(run.unknownId)} className="relative z-10 font-mono text-small text-indigo no-underline hover:underline">
        {run.unknownCode}
      </Link>{' '}
      {run.unknownTitle}
    </span>
  );
}

function RunEntry({ run, hasUnknown }: { run: Run; hasUnknown: boolean }) {
  const { constitutions, survivors, seconds } = runFigures(run);
  return (
    <li className="relative px-4 py-3">
      <div className="flex items-start justify-between gap-3">
        <div className="min-w-0">
          <p className="flex flex-wrap items-center gap-x-3">
            <Link to={paths.run(run.id)} className="inline-block py-px font-semibold text-indigo no-underline after:absolute after:inset-0">
              Run {run.number}
            </Link>
            <RunState run={run} />
          </p>
          {hasUnknown ? <UnknownLink run={run} /> : null}
        </div>
        <FunnelMini
          funnel={run.funnel}
          progress={run.progress}
          isIncomplete={isIncompleteRun(run)}
          {...(isEnded(run) ? { keptCount: run.keptCount } : {})}
        />
      </div>
      <p className="tabular text-table">
        {count(constitutions)} {constitutions === 1 ? 'constitution' : 'constitutions'}, {count(survivors)}{' '}
        {survivors === 1 ? 'survives' : 'survive'}
        {seconds === null ? '' : `, ${formatSeconds(Math.max(0, seconds))}`}
      </p>
      <p className="text-small text-faded">
        <Time iso={run.createdAt} />, {run.startedBy.name}, revision {run.revisionNumber}
      </p>
    </li>
  );
}
