import { ChevronLeft, ChevronRight } from 'lucide-react';
import { formatCount } from '../lib/numbers';
import { IconButton } from './icon-button';

/** "51–100 of 212" with steps to the pages beside it. */
export function Pagination({
  page,
  pageSize,
  total,
  onPage,
}: {
  page: number;
  pageSize: number;
  total: number;
  onPage: (page: number) => void;
}) {
  const pageCount = Math.max(1, Math.ceil(total / pageSize));
  const first = total === 0 ? 0 : (page - 1) * pageSize + 1;
  return (
    <nav aria-label="Pages" className="flex items-center justify-end gap-2 text-table text-faded tabular">
      <span>
        {formatCount(first)}–{formatCount(Math.min(page * pageSize, total))} of {formatCount(total)}
      </span>
      <IconButton label="Previous page" icon={<ChevronLeft className="size-4" />} disabled={page <= 1} onClick={() => onPage(page - 1)} />
      <IconButton
        label="Next page"
        icon={<ChevronRight className="size-4" />}
        disabled={page >= pageCount}
        onClick={() => onPage(page + 1)}
      />
    </nav>
  );
}
