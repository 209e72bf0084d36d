import { useVirtualizer } from '@tanstack/react-virtual';
import { useRef, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';

export interface VirtualColumn<T> {
  key: string;
  head: ReactNode;
  /** A CSS grid track: `minmax(120px, 1fr)`, `80px`. */
  width: string;
  align?: 'left' | 'right';
  cell: (row: T, index: number) => ReactNode;
  /** Present on the column the rows are sorted by. */
  sorted?: 'ascending' | 'descending' | undefined;
}

interface VirtualTableProps<T> {
  caption: string;
  columns: ReadonlyArray<VirtualColumn<T>>;
  rows: readonly T[];
  rowKey: (row: T) => string;
  rowHeight?: number;
  /** Height of the scrolling frame, a CSS length. */
  height?: string;
  isSelected?: (row: T) => boolean;
  onRowClick?: (row: T) => void;
}

/** A table of which only the visible rows exist: thousands of rows scroll smoothly. Rows have one height. */
export function VirtualTable<T>({
  caption,
  columns,
  rows,
  rowKey,
  rowHeight = 36,
  height = 'min(70dvh, 720px)',
  isSelected,
  onRowClick,
}: VirtualTableProps<T>) {
  const frame = useRef<HTMLDivElement>(null);
  const virtualizer = useVirtualizer({
    count: rows.length,
    getScrollElement: () => frame.current,
    estimateSize: () => rowHeight,
    overscan: 12,
  });
  const template = { gridTemplateColumns: columns.map((column) => column.width).join(' ') };
  const cellClass = (column: VirtualColumn<T>) => classNames('min-w-0 truncate px-3', column.align === 'right' && 'text-right');
  return (
    <div ref={frame} tabIndex={0} role="region" aria-label={caption} className="overflow-auto" style={{ height }}>
      <div role="table" aria-label={caption} aria-rowcount={rows.length + 1} className="min-w-fit text-table tabular">
        <div role="rowgroup" className="sticky top-0 z-10 bg-cloth">
          <div
            role="row"
            aria-rowindex={1}
            className="grid h-9 items-center border-b border-seam font-semibold text-faded"
            style={template}
          >
            {columns.map((column) => (
              <div key={column.key} role="columnheader" aria-sort={column.sorted} className={cellClass(column)}>
                {column.head}
              </div>
            ))}
          </div>
        </div>
        <div role="rowgroup" className="relative" style={{ height: virtualizer.getTotalSize() }}>
          {virtualizer.getVirtualItems().map((item) => {
            const row = rows[item.index];
            if (row === undefined) return null;
            return (
              <div
                key={rowKey(row)}
                role="row"
                aria-rowindex={item.index + 2}
                aria-selected={isSelected?.(row) === true || undefined}
                onClick={onRowClick === undefined ? undefined : () => onRowClick(row)}
                className={classNames(
                  'absolute inset-x-0 top-0 grid items-center border-b border-seam',
                  isSelected?.(row) === true ? 'bg-indigo-wash' : 'hover:bg-fold',
                  onRowClick !== undefined && 'cursor-pointer',
                )}
                style={{ ...template, height: rowHeight, transform: `translateY(${item.start}px)` }}
              >
                {columns.map((column) => (
                  <div key={column.key} role="cell" className={cellClass(column)}>
                    {column.cell(row, item.index)}
                  </div>
                ))}
              </div>
            );
          })}
        </div>
      </div>
    </div>
  );
}
