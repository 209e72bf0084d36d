import { ArrowDown, ArrowUp, ChevronsUpDown } from 'lucide-react';
import type { ComponentProps, ReactNode } from 'react';
import { classNames } from '../lib/class-names';

export type SortDirection = 'ascending' | 'descending';

/** A table that scrolls sideways in its own frame when the screen is narrow. `caption` is for screen readers. */
export function Table({
  caption,
  head,
  children,
  className,
}: {
  caption: string;
  head: ReactNode;
  children: ReactNode;
  className?: string;
}) {
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label={caption}>
      <table className={classNames('w-full border-collapse text-left text-table', className)}>
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="border-b border-seam text-faded">{head}</tr>
        </thead>
        <tbody>{children}</tbody>
      </table>
    </div>
  );
}

type Align = 'left' | 'right';
const alignClass = (align: Align) => (align === 'right' ? 'text-right' : 'text-left');

export function HeaderCell({ align = 'left', className, children, ...rest }: Omit<ComponentProps<'th'>, 'align'> & { align?: Align }) {
  return (
    <th
      scope="col"
      className={classNames('h-8 px-3 font-semibold whitespace-nowrap first:pl-4 last:pr-4', alignClass(align), className)}
      {...rest}
    >
      {children}
    </th>
  );
}

/** A column head that sorts; the caller keeps the order, best in the URL. */
export function SortHeaderCell<K extends string>({
  column,
  sort,
  onSort,
  align = 'left',
  children,
  className,
}: {
  column: K;
  sort: { column: string; direction: SortDirection };
  onSort: (column: K, direction: SortDirection) => void;
  align?: Align;
  children: ReactNode;
  className?: string;
}) {
  const isCurrent = sort.column === column;
  const Icon = !isCurrent ? ChevronsUpDown : sort.direction === 'ascending' ? ArrowUp : ArrowDown;
  return (
    <HeaderCell align={align} aria-sort={isCurrent ? sort.direction : undefined} className={className}>
      <button
        type="button"
        className={classNames('inline-flex items-center gap-1 rounded-small hover:text-ink', isCurrent && 'text-ink')}
        onClick={() => onSort(column, isCurrent && sort.direction === 'ascending' ? 'descending' : 'ascending')}
      >
        {children}
        <Icon aria-hidden="true" className="size-3.5" />
      </button>
    </HeaderCell>
  );
}

export function Row({ isSelected = false, className, ...rest }: ComponentProps<'tr'> & { isSelected?: boolean }) {
  return (
    <tr
      aria-selected={isSelected || undefined}
      className={classNames('border-b border-seam last:border-b-0', isSelected ? 'bg-indigo-wash' : 'hover:bg-fold', className)}
      {...rest}
    />
  );
}

export function Cell({ align = 'left', className, ...rest }: Omit<ComponentProps<'td'>, 'align'> & { align?: Align }) {
  return <td className={classNames('h-9 px-3 py-1 first:pl-4 last:pr-4', alignClass(align), className)} {...rest} />;
}
