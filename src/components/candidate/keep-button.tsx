import { BookmarkCheck, BookmarkPlus } from 'lucide-react';
import { Button } from '../button';

/** Puts a candidate on the shortlist; afterwards says that it is there. */
export function KeepButton({
  isKept,
  isBusy,
  onKeep,
  variant = 'secondary',
  size = 'small',
  tabIndex,
}: {
  isKept: boolean;
  isBusy: boolean;
  onKeep: () => void;
  variant?: 'primary' | 'secondary';
  size?: 'regular' | 'small';
  tabIndex?: number;
}) {
  if (isKept) {
    return (
      <span className="inline-flex items-center gap-1.5 text-table whitespace-nowrap text-verdigris">
        <BookmarkCheck aria-hidden="true" className="size-4" />
        <span className={size === 'small' ? 'sr-only' : undefined}>On the shortlist</span>
        {size === 'small' ? <span aria-hidden="true">Kept</span> : null}
      </span>
    );
  }
  return (
    <Button
      variant={variant}
      size={size}
      isBusy={isBusy}
      icon={<BookmarkPlus aria-hidden="true" className="size-4" />}
      onClick={onKeep}
      {...(tabIndex === undefined ? {} : { tabIndex })}
    >
      Keep
    </Button>
  );
}
