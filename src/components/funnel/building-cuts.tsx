import { formatCount } from '../../lib/numbers';

interface Cut {
  readonly reason: string;
  readonly text: string;
  readonly count: number;
}

/** What never became a constitution: branches of the search that a constraint cut while structures were being built. */
export function BuildingCuts({ cuts }: { cuts: readonly Cut[] }) {
  if (cuts.length === 0) return null;
  return (
    <section aria-label="Cut while building" className="mt-4 border-t border-seam pt-3 text-small">
      <h3 className="text-small font-semibold">Cut while building</h3>
      <p className="text-faded">Branches of the search, each of which would have held many constitutions or none.</p>
      <ul className="tabular mt-1">
        {cuts.map(({ reason, text, count }) => (
          <li key={reason} className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 border-t border-seam py-1 first:border-t-0">
            <span className="min-w-0 wrap-break-word">{text}</span>
            <span className="font-semibold text-madder whitespace-nowrap">
              {formatCount(count)} {count === 1 ? 'branch' : 'branches'}
            </span>
          </li>
        ))}
      </ul>
    </section>
  );
}
