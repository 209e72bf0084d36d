import { formatCount } from '../../lib/numbers';
import { Cell, HeaderCell, Row, Table } from '../table';
import type { Band } from './funnel-stages';

/** Every count and every reason behind the picture. */
export function FunnelTable({ band }: { band: Band }) {
  return (
    <Table
      caption="Constitutions left and cut at each stage, with reasons"
      head={
        <>
          <HeaderCell>Stage</HeaderCell>
          <HeaderCell>Reason</HeaderCell>
          <HeaderCell align="right">Cut</HeaderCell>
          <HeaderCell align="right">Left</HeaderCell>
        </>
      }
    >
      <Row>
        <Cell>Formula, fragments, hydrogens</Cell>
        <Cell className="text-faded">Woven from the formula with the required fragments and attached hydrogens</Cell>
        <Cell align="right" />
        <Cell align="right">{band.woven === null ? '–' : formatCount(band.woven)}</Cell>
      </Row>
      {band.gates.flatMap((gate) => [
        <Row key={gate.stage}>
          <Cell className="whitespace-nowrap">{gate.name}</Cell>
          <Cell className="text-faded">{gate.asks}</Cell>
          <Cell align="right">{gate.left === null ? '–' : formatCount(gate.cut)}</Cell>
          <Cell align="right">{gate.left === null ? '–' : formatCount(gate.left)}</Cell>
        </Row>,
        ...gate.reasons.map((reason) => (
          <Row key={`${gate.stage}-${reason.reason}`}>
            <Cell />
            <Cell>{reason.text}</Cell>
            <Cell align="right" className={gate.stage === 'ranked' ? 'text-weld' : 'text-madder'}>
              {formatCount(reason.count)}
            </Cell>
            <Cell />
          </Row>
        )),
      ])}
    </Table>
  );
}
