import { LayoutGrid, Rows3 } from 'lucide-react';
import { classNames } from '../../../lib/class-names';
import type { RankingLayout } from '../hooks/use-ranking-view';

const LAYOUTS = [
  { layout: 'cards', label: 'Cards', icon: LayoutGrid },
  { layout: 'table', label: 'Table', icon: Rows3 },
] as const;

/** Two views of one selection. */
export function LayoutSwitch({ current, onChange }: { current: RankingLayout; onChange: (layout: RankingLayout) => void }) {
  return (
    <div role="group" aria-label="View" className="inline-flex overflow-hidden rounded-panel border border-selvage bg-cloth">
      {LAYOUTS.map(({ layout, label, icon: Icon }) => (
        <button
          key={layout}
          type="button"
          aria-pressed={layout === current}
          className={classNames(
            'inline-flex min-h-7 items-center gap-1.5 border-l border-selvage px-2.5 text-table font-semibold first:border-l-0',
            layout === current ? 'bg-indigo-wash text-indigo' : 'hover:bg-fold',
          )}
          onClick={() => onChange(layout)}
        >
          <Icon aria-hidden="true" className="size-4" />
          {label}
        </button>
      ))}
    </div>
  );
}
