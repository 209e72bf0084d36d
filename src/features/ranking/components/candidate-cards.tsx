import { useWindowVirtualizer } from '@tanstack/react-virtual';
import { memo, useEffect, useId, useLayoutEffect, useRef, useState } from 'react';
import { useElementWidth } from '../../../components/funnel/use-element-width';
import { classNames } from '../../../lib/class-names';
import type { CandidateRow } from '../../../lib/queries/candidate-queries';
import { useGridKeys } from '../hooks/use-grid-keys';
import { CandidateCard, CARD_HEIGHT } from './candidate-card';
import type { CandidateListProps } from './candidate-list-props';

const GAP = 12;
const NARROWEST_CARD = 216;

/** Distance of an element from the top of the page, kept current while things above it grow and shrink. */
function usePageOffset(element: HTMLElement | null): number {
  const [offset, setOffset] = useState(0);
  useLayoutEffect(() => {
    if (element === null) return undefined;
    const measure = () => setOffset(Math.round(element.getBoundingClientRect().top + window.scrollY));
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(document.body);
    return () => observer.disconnect();
  }, [element]);
  return offset;
}

interface CardCellProps extends Pick<CandidateListProps, 'canKeep' | 'onSelect' | 'onKeep' | 'onLeave'> {
  id: string;
  index: number;
  column: number;
  candidate: CandidateRow | undefined;
  isSelected: boolean;
  isKept: boolean;
  isKeeping: boolean;
}

/** One card in its place; scrolling renders only those that come into view. */
const CardCell = memo(function CardCell({
  id,
  index,
  column,
  candidate,
  isSelected,
  isKept,
  isKeeping,
  canKeep,
  onSelect,
  onKeep,
  onLeave,
}: CardCellProps) {
  return (
    <div role="gridcell" id={id} aria-colindex={column + 1} aria-selected={isSelected} onClick={() => onSelect(index)} className="min-w-0">
      {candidate === undefined ? (
        <div aria-hidden="true" className="rounded-panel border border-seam bg-cloth p-3" style={{ height: CARD_HEIGHT }}>
          <div className="skeleton h-4 w-1/3" />
        </div>
      ) : (
        <CandidateCard
          candidate={candidate}
          isSelected={isSelected}
          isKept={isKept}
          isKeeping={isKeeping}
          canKeep={canKeep}
          onKeep={() => onKeep(candidate)}
          onLeave={() => onLeave(candidate)}
        />
      )}
    </div>
  );
});

/** Candidates as cards in a grid that scrolls with the page; only the rows on screen exist. */
export function CandidateCards({
  rows,
  total,
  selectedIndex,
  onShown,
  onSelect,
  onOpen,
  onLeave,
  onKeep,
  isKept,
  keepingId,
  canKeep,
}: CandidateListProps) {
  const id = useId();
  const [frame, width, element] = useElementWidth<HTMLDivElement>();
  const offset = usePageOffset(element);
  const columns = Math.max(1, Math.floor((width + GAP) / (NARROWEST_CARD + GAP)));
  const virtualizer = useWindowVirtualizer({
    count: width === 0 ? 0 : Math.ceil(total / columns),
    estimateSize: () => CARD_HEIGHT + GAP,
    overscan: 2,
    scrollMargin: offset,
  });
  const items = virtualizer.getVirtualItems();
  const start = (items[0]?.index ?? 0) * columns;
  const end = Math.min(total, ((items.at(-1)?.index ?? 0) + 1) * columns);
  useEffect(() => onShown(start, end), [onShown, start, end]);

  const hasFocus = useRef(false);
  const move = (index: number) => {
    onSelect(index);
    virtualizer.scrollToIndex(Math.floor(index / columns), { align: 'auto' });
  };
  const selected = selectedIndex === null ? undefined : rows.at(selectedIndex);
  const onKeyDown = useGridKeys({
    total,
    columns,
    index: selectedIndex,
    rowsOnScreen: Math.max(1, Math.floor(window.innerHeight / (CARD_HEIGHT + GAP))),
    onMove: move,
    onOpen: () => selected !== undefined && onOpen(selected),
    onKeep: () => selected !== undefined && onKeep(selected),
  });
  return (
    <div
      ref={frame}
      role="grid"
      aria-label="Candidates"
      aria-rowcount={Math.ceil(total / columns)}
      aria-colcount={columns}
      aria-activedescendant={selectedIndex === null ? undefined : `${id}-${selectedIndex}`}
      tabIndex={0}
      onKeyDown={onKeyDown}
      onFocus={(event) => {
        // Coming in by the keyboard lands on the selection, or on the first card.
        if (
          event.target === event.currentTarget &&
          !hasFocus.current &&
          selectedIndex === null &&
          event.currentTarget.matches(':focus-visible')
        )
          onSelect(0);
        hasFocus.current = true;
      }}
      onBlur={() => {
        hasFocus.current = false;
      }}
      className={classNames('group/grid relative rounded-panel outline-offset-4', selectedIndex !== null && 'outline-none!')}
      style={{ height: Math.max(CARD_HEIGHT, virtualizer.getTotalSize() - GAP) }}
    >
      {items.map((item) => (
        <div
          key={item.key}
          role="row"
          aria-rowindex={item.index + 1}
          className="absolute inset-x-0 top-0 grid"
          style={{ gap: GAP, gridTemplateColumns: `repeat(${columns}, minmax(0, 1fr))`, transform: `translateY(${item.start - offset}px)` }}
        >
          {Array.from({ length: Math.min(columns, total - item.index * columns) }, (_, column) => {
            const index = item.index * columns + column;
            const candidate = rows.at(index);
            return (
              <CardCell
                key={index}
                id={`${id}-${index}`}
                index={index}
                column={column}
                candidate={candidate}
                isSelected={index === selectedIndex}
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
      ))}
    </div>
  );
}
