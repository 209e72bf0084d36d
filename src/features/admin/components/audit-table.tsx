import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import type { AuditRow } from '../api/installation';

/** `teamMember.changeRole` or `change_role` read as words. */
const asWords = (code: string) =>
  code
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .replace(/[._-]+/g, ' ')
    .toLowerCase();

const valueText = (value: unknown): string => (typeof value === 'string' ? value : JSON.stringify(value));

export function AuditTable({ rows }: { rows: readonly AuditRow[] }) {
  return (
    <Table
      caption="Audit events, newest first"
      head={
        <>
          <HeaderCell>When</HeaderCell>
          <HeaderCell>Who</HeaderCell>
          <HeaderCell>What</HeaderCell>
          <HeaderCell>On what</HeaderCell>
          <HeaderCell>Detail</HeaderCell>
        </>
      }
    >
      {rows.map((row) => (
        <Row key={row.id}>
          <Cell className="align-top whitespace-nowrap text-faded">
            <Time iso={row.at} />
          </Cell>
          <Cell className="align-top whitespace-nowrap">{row.actor}</Cell>
          <Cell className="align-top whitespace-nowrap">{asWords(row.action)}</Cell>
          <Cell className="align-top font-mono text-small break-all">{row.subject}</Cell>
          <Cell className="min-w-56 align-top">
            <dl className="flex flex-wrap gap-x-4">
              {Object.entries(row.detail).map(([key, value]) => (
                <div key={key} className="flex min-w-0 gap-1">
                  <dt className="text-faded">{asWords(key)}</dt>
                  <dd className="break-all">{valueText(value)}</dd>
                </div>
              ))}
            </dl>
          </Cell>
        </Row>
      ))}
    </Table>
  );
}
