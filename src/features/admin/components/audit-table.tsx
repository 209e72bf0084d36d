import { Cell, HeaderCell, Row, Table } from '../../../components/table';
import { Time } from '../../../components/time';
import type { AuditRow } from '../api/installation';

/** `teamMember.changeRole` or `change_role` read as words. */
const asWords = (code: string) =>
  code
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .replace(/[._-]+/g, ' ')
    .toLowerCase();

/** A detail as people read it: lists with commas, groups as name and value. */
function valueText(value: unknown): string {
  if (value === null || value === undefined) return 'none';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.map(valueText).join(', ');
  if (typeof value === 'object') {
    return Object.entries(value)
      .map(([key, part]) => `${asWords(key)} ${valueText(part)}`)
      .join(', ');
  }
  return String(value);
}

function Detail({ detail }: { detail: AuditRow['detail'] }) {
  const entries = Object.entries(detail);
  if (entries.length === 0) return null;
  return (
    <dl className="flex flex-wrap gap-x-4">
      {entries.map(([key, value]) => (
        <div key={key} className="flex min-w-0 flex-wrap gap-x-1">
          <dt className="text-faded">{asWords(key)}</dt>
          <dd className="wrap-anywhere">{valueText(value)}</dd>
        </div>
      ))}
    </dl>
  );
}

/** On a phone who, subject and detail fold into two columns. */
export function AuditTable({ rows }: { rows: readonly AuditRow[] }) {
  return (
    <Table
      caption="Audit events, newest first"
      head={
        <>
          <HeaderCell>When</HeaderCell>
          <HeaderCell className="hidden tablet:table-cell">Who</HeaderCell>
          <HeaderCell>What</HeaderCell>
          <HeaderCell className="hidden tablet:table-cell">On what</HeaderCell>
          <HeaderCell className="hidden tablet:table-cell">Detail</HeaderCell>
        </>
      }
    >
      {rows.map((row) => (
        <Row key={row.id}>
          <Cell className="py-1.5 align-top text-faded">
            <Time iso={row.at} />
            <span className="block text-ink tablet:hidden">{row.actor}</span>
          </Cell>
          <Cell className="hidden py-1.5 align-top whitespace-nowrap tablet:table-cell">{row.actor}</Cell>
          <Cell className="py-1.5 align-top">
            {asWords(row.action)}
            <span className="block tablet:hidden">
              <span className="wrap-anywhere">{row.subject}</span>
              <Detail detail={row.detail} />
            </span>
          </Cell>
          <Cell className="hidden py-1.5 align-top wrap-anywhere tablet:table-cell">{row.subject}</Cell>
          <Cell className="hidden py-1.5 align-top tablet:table-cell">
            <Detail detail={row.detail} />
          </Cell>
        </Row>
      ))}
    </Table>
  );
}
