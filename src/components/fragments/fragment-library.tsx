import { Search } from 'lucide-react';
import { useState } from 'react';
import { FRAGMENT_GROUPS, FRAGMENT_LIBRARY, type LibraryFragment } from '../../../shared/fragments/library';
import { EmptyState } from '../states';
import { FragmentTile } from './fragment-tile';

const GRID = 'grid grid-cols-[repeat(auto-fill,minmax(148px,1fr))] gap-2';

/** The built-in fragments by kind, as pictures; typing narrows them by name, kind or SMILES. */
export function FragmentLibrary({ onPick, actionVerb }: { onPick?: (fragment: LibraryFragment) => void; actionVerb?: string }) {
  const [search, setSearch] = useState('');
  const wanted = search.trim().toLowerCase();
  const groups = FRAGMENT_GROUPS.map((group) => ({
    group,
    fragments: FRAGMENT_LIBRARY.filter(
      (fragment) =>
        fragment.group === group &&
        (wanted === '' ||
          fragment.name.toLowerCase().includes(wanted) ||
          group.toLowerCase().includes(wanted) ||
          fragment.smiles.toLowerCase() === wanted),
    ),
  })).filter(({ fragments }) => fragments.length > 0);
  return (
    <div>
      <label className="relative block max-w-md">
        <span className="sr-only">Search the built-in fragments</span>
        <Search aria-hidden="true" className="pointer-events-none absolute top-1/2 left-3 size-4 -translate-y-1/2 text-faded" />
        <input
          type="search"
          className="control"
          style={{ paddingLeft: 34 }}
          placeholder="Search by name, kind or SMILES"
          value={search}
          onChange={(event) => setSearch(event.target.value)}
        />
      </label>
      {groups.length === 0 ? (
        <EmptyState title="No fragment of that name">Draw it instead, or search for a shorter word.</EmptyState>
      ) : (
        groups.map(({ group, fragments }) => (
          <section key={group} aria-label={group} className="mt-5">
            <h3 className="mb-2 text-table font-semibold text-faded">{group}</h3>
            <div className={GRID}>
              {fragments.map((fragment) => (
                <FragmentTile
                  key={fragment.id}
                  name={fragment.name}
                  smiles={fragment.smiles}
                  {...(onPick === undefined
                    ? {}
                    : { onPick: () => onPick(fragment), actionLabel: `${actionVerb ?? 'Choose'} ${fragment.name}` })}
                />
              ))}
            </div>
          </section>
        ))
      )}
    </div>
  );
}

export { GRID as FRAGMENT_GRID };
