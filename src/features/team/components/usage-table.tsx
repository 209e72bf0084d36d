import { SlidersHorizontal } from 'lucide-react';
import { useState } from 'react';
import { IconButton } from '../../../components/icon-button';
import { Meter } from '../../../components/meter';
import { Badge } from '../../../components/status-word';
import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import type { UsageRow } from '../api/team';
import { QuotaDialog } from './quota-dialog';
import { roleLabel } from './role-options';

/** What each person used this month, against what they may. */
export function UsageTable({ teamId, people, canSetQuotas }: { teamId: string; people: readonly UsageRow[]; canSetQuotas: boolean }) {
  const [edited, setEdited] = useState<UsageRow | null>(null);
  return (
    <>
      <Table
        caption="Usage and quotas"
        head={
          <>
            <HeaderCell>Name</HeaderCell>
            <HeaderCell>CPU time this month</HeaderCell>
            <HeaderCell align="right" className="hidden tablet:table-cell">
              Runs
            </HeaderCell>
            <HeaderCell align="right" className="hidden tablet:table-cell">
              Candidates a run
            </HeaderCell>
            <HeaderCell align="right" className="hidden tablet:table-cell">
              Runs at once
            </HeaderCell>
            <HeaderCell>
              <span className="sr-only">Actions</span>
            </HeaderCell>
          </>
        }
      >
        {people.map((person) => (
          <Row key={person.userId}>
            <Cell>
              <span className="font-semibold">{person.name}</span> <span className="text-faded">{roleLabel(person.role)}</span>
              {person.isOverridden ? (
                <>
                  {' '}
                  <Badge tone="indigo">own figures</Badge>
                </>
              ) : null}
              <span className="block text-small text-faded tablet:hidden">
                {formatCount(person.runCount)} run{person.runCount === 1 ? '' : 's'}
              </span>
            </Cell>
            <Cell className="py-1.5">
              <Meter
                label={`CPU time of ${person.name}`}
                used={person.usedCpuSeconds}
                reserved={person.reservedCpuSeconds}
                limit={person.quota.cpuSecondsPerMonth}
                text={
                  person.quota.cpuSecondsPerMonth === 0 && person.usedCpuSeconds === 0
                    ? 'no CPU time in this role'
                    : `${formatSeconds(person.usedCpuSeconds)} of ${formatSeconds(person.quota.cpuSecondsPerMonth)}${person.reservedCpuSeconds > 0 ? `, ${formatSeconds(person.reservedCpuSeconds)} reserved` : ''}`
                }
              />
            </Cell>
            <Cell align="right" className="hidden tablet:table-cell">
              {formatCount(person.runCount)}
            </Cell>
            <Cell align="right" className="hidden tablet:table-cell">
              {formatCount(person.quota.candidatesPerRun)}
            </Cell>
            <Cell align="right" className="hidden tablet:table-cell">
              {formatCount(person.quota.runsAtOnce)}
            </Cell>
            <Cell align="right">
              {canSetQuotas ? (
                <IconButton
                  label={`Set the quota of ${person.name}`}
                  icon={<SlidersHorizontal className="size-4" />}
                  onClick={() => setEdited(person)}
                />
              ) : null}
            </Cell>
          </Row>
        ))}
      </Table>
      {edited === null ? null : <QuotaDialog teamId={teamId} person={edited} onClose={() => setEdited(null)} />}
    </>
  );
}
