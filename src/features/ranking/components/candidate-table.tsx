import { useVirtualizer } from '@tanstack/react-virtual';
import { ArrowDown, ArrowUp, ChevronsUpDown } from 'lucide-react';
import { memo, useEffect, useId, useMemo, useRef } from 'react';
import { listScoreTerms } from '../../../components/candidate/score-terms';
import { classNames } from '../../../lib/class-names';
import type { CandidateOrder, CandidateRow } from '../../../lib/queries/candidate-queries';
import { useGridKeys } from '../hooks/use-grid-keys';
import { candidateColumns, ROW_HEIGHT, type CandidateColumn } from './candidate-columns';
import type { CandidateListProps } from './candidate-list-props';

const HEAD_HEIGHT = 36;

const stickyClass = (isSelected: boolean) =>
  classNames(
    'tablet:sticky tablet:right-0 flex h-full items-center justify-end',
    isSelected ? 'bg-indigo-wash' : 'bg-cloth group-hover/row:bg-fold',
  );

function ColumnHead({
  column,
  order,
  onOrder,
}: {
  column: CandidateColumn;
  order: CandidateOrder;
  onOrder: (order: CandidateOrder) => void;
}) {
  const { sort } = column;
  const isCurrent = sort !== undefined && order.sort === sort;
  const Icon = !isCurrent ? ChevronsUpDown : order.direction === 'ascending' ? ArrowUp : ArrowDown;
  return (
    <div
      role="columnheader"
      title={column.hint}
      aria-sort={isCurrent ? order.direction : undefined}
      className={classNames('min-w-0 px-2.5', column.align === 'right' && 'text-right')}
    >
      {sort === undefined ? (
        column.head
      ) : (
        <button
          type="button"
          className={classNames('inline-flex items-center gap-1 rounded-small whitespace-nowrap hover:text-ink', isCurrent && 'text-ink')}
          onClick={() => onOrder({ sort, direction: isCurrent && order.direction === 'ascending' ? 'descending' : 'ascending' })}
        >
          {column.head}
          <Icon aria-hidden="true" className="size-3.5" />
        </button>
      )}
    </div>
  );
}

const templateOf = (columns: readonly CandidateColumn[]) => columns.map((column) => column.width).join(' ');

interface TableRowProps extends Pick<CandidateListProps, 'canKeep' | 'onSelect' | 'onKeep' | 'onLeave'> {
  id: string;
  index: number;
  top: number;
  candidate: CandidateRow | undefined;
  columns: readonly CandidateColumn[];
  isSelected: boolean;
  isKept: boolean;
  isKeeping: boolean;
}

/** One row; scrolling renders only those that come into view. */
const TableRow = memo(function TableRow({
  id,
  index,
  top,
  candidate,
  columns,
  isSelected,
  isKept,
  isKeeping,
  canKeep,
  onSelect,
  onKeep,
  onLeave,
}: TableRowProps) {
  return (
    <div
      role="row"
      id={id}
      aria-rowindex={index + 2}
      aria-selected={isSelected}
      onClick={() => onSelect(index)}
      className={classNames(
        'group/row absolute inset-x-0 top-0 grid items-center border-b border-seam',
        isSelected
          ? 'bg-indigo-wash group-focus-visible/grid:outline-2 group-focus-visible/grid:-outline-offset-2 group-focus-visible/grid:outline-indigo'
          : 'hover:bg-fold',
      )}
      style={{ gridTemplateColumns: templateOf(columns), height: ROW_HEIGHT, transform: `translateY(${top}px)` }}
    >
      {candidate === undefined ? (
        <div role="gridcell" className="col-span-full px-3">
          <span className="sr-only">Loading</span>
          <div aria-hidden="true" className="skeleton h-4 w-40" />
        </div>
      ) : (
        columns.map((column) => (
          <div
            key={column.key}
            role="gridcell"
            className={classNames(
              'min-w-0 px-2.5',
              column.align === 'right' && 'text-right',
              column.isSticky === true && stickyClass(isSelected),
            )}
          >
            {column.cell(candidate, {
              isSelected,
              isKept,
              isKeeping,
              canKeep,
              onKeep: () => onKeep(candidate),
              onLeave: () => onLeave(candidate),
            })}
          </div>
        ))
      )}
    </div>
  );
});

/** Candidates as a table of which only the rows on screen exist. */
export function CandidateTable({
  rows,
  total,
  order,
  selectedIndex,
  onShown,
  onSelect,
  onOpen,
  onLeave,
  onKeep,
  onOrder,
  isKept,
  keepingId,
  canKeep,
}: CandidateListProps) {
  const id = useId();
  const frame = useRef<HTMLDivElement>(null);
  const best = rows.at(0);
  const terms = best?.terms;
  const columns = useMemo(() => candidateColumns(terms === undefined ? [] : listScoreTerms(terms).map(({ term }) => term)), [terms]);
  const virtualizer = useVirtualizer({
    count: total,
    getScrollElement: () => frame.current,
    estimateSize: () => ROW_HEIGHT,
    overscan: 6,
    scrollMargin: HEAD_HEIGHT,
    scrollPaddingStart: HEAD_HEIGHT,
  });
  const items = virtualizer.getVirtualItems();
  const start = items[0]?.index ?? 0;
  const end = (items.at(-1)?.index ?? 0) + 1;
  useEffect(() => onShown(start, end), [onShown, start, end]);

  const wasShown = useRef(false);
  useEffect(() => {
    // Coming from the cards or by a link, the selected row is brought into view once.
    if (wasShown.current || selectedIndex === null) return;
    wasShown.current = true;
    virtualizer.scrollToIndex(selectedIndex, { align: 'auto' });
  }, [virtualizer, selectedIndex]);

  const selected = selectedIndex === null ? undefined : rows.at(selectedIndex);
  const onKeyDown = useGridKeys({
    total,
    columns: 1,
    index: selectedIndex,
    rowsOnScreen: Math.max(1, Math.floor((frame.current?.clientHeight ?? ROW_HEIGHT) / ROW_HEIGHT) - 1),
    onMove: (index) => {
      wasShown.current = true;
      onSelect(index);
      virtualizer.scrollToIndex(index, { align: 'auto' });
    },
    onOpen: () => selected !== undefined && onOpen(selected),
    onKeep: () => selected !== undefined && onKeep(selected),
  });
  return (
    <div className="rounded-panel border border-seam bg-cloth">
      <div
        ref={frame}
        role="grid"
        aria-label="Candidates"
        aria-rowcount={total + 1}
        aria-colcount={columns.length}
        aria-activedescendant={selectedIndex === null ? undefined : `${id}-${selectedIndex}`}
        tabIndex={0}
        onKeyDown={onKeyDown}
        className={classNames('group/grid overflow-auto rounded-panel text-table', selectedIndex !== null && 'outline-none!')}
        style={{ height: `min(max(360px, calc(100dvh - 190px)), ${HEAD_HEIGHT + total * ROW_HEIGHT + 2}px)` }}
      >
        <div className="tabular relative min-w-fit" style={{ height: HEAD_HEIGHT + virtualizer.getTotalSize() }}>
          <div
            role="row"
            aria-rowindex={1}
            className="sticky top-0 z-10 grid items-center border-b border-seam bg-cloth font-semibold text-faded"
            style={{ gridTemplateColumns: templateOf(columns), height: HEAD_HEIGHT }}
          >
            {columns.map((column) => (
              <ColumnHead key={column.key} column={column} order={order} onOrder={onOrder} />
            ))}
          </div>
          {items.map((item) => {
            const candidate = rows.at(item.index);
            return (
              <TableRow
                key={item.key}
                id={`${id}-${item.index}`}
                index={item.index}
                top={item.start}
                candidate={candidate}
                columns={columns}
                isSelected={item.index === selectedIndex}
                isKept={candidate !== undefined && isKept(candidate)}
                isKeeping={candidate !== undefined && keepingId === candidate.id}
                canKeep={canKeep}
                onSelect={onSelect}
                onKeep={onKeep}
                onLeave={onLeave}
              />
            );
          })}
        </div>
      </div>
    </div>
  );
}
