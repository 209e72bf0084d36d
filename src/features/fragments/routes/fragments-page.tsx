import { useQuery } from '@tanstack/react-query';
import { Plus, Trash2 } from 'lucide-react';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { Button } from '../../../components/button';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { FRAGMENT_GRID, FragmentLibrary } from '../../../components/fragments/fragment-library';
import { FragmentTile } from '../../../components/fragments/fragment-tile';
import { IconButton } from '../../../components/icon-button';
import { PageHeader } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { Tabs } from '../../../components/tabs';
import { usePageTitle } from '../../../components/use-page-title';
import { teamFragmentsQuery, useRemoveTeamFragment, type TeamFragment } from '../../../lib/queries/fragment-queries';
import { useCurrentTeam, type Membership } from '../../../lib/session';
import { showToast } from '../../../lib/toasts';
import { NewFragmentDialog } from '../components/new-fragment-dialog';

/** Pieces of structure to build evidence from: the built-in ones and the team's own. */
export function Component() {
  usePageTitle('Fragments');
  const team = useCurrentTeam();
  const [search, setSearch] = useSearchParams();
  const current = search.get('of') === 'team' && team !== null ? 'team' : 'library';
  return (
    <>
      <PageHeader
        title="Fragments"
        lead="Pieces with open bonds, to require or to exclude in evidence. A wave marks where the rest of the molecule is bonded; everything else stays as drawn."
      />
      <Tabs
        label="Fragment collections"
        items={[
          { key: 'library', label: 'Common fragments' },
          ...(team === null ? [] : [{ key: 'team' as const, label: `Of ${team.teamName}` }]),
        ]}
        current={current}
        onSelect={(key) => setSearch(key === 'team' ? { of: 'team' } : {}, { replace: true })}
      >
        {current === 'team' && team !== null ? <TeamFragments team={team} /> : <FragmentLibrary />}
      </Tabs>
    </>
  );
}

function TeamFragments({ team }: { team: Membership }) {
  const list = useQuery(teamFragmentsQuery(team.teamId));
  const [isAdding, setIsAdding] = useState(false);
  const [removing, setRemoving] = useState<TeamFragment | null>(null);
  const remove = useRemoveTeamFragment(team.teamId);
  if (list.isPending) return <LoadingState label="Loading the team's fragments" />;
  if (list.isError) return <ErrorState error={list.error} onRetry={() => void list.refetch()} />;
  const addButton = team.abilities.createFragment ? (
    <Button variant="primary" icon={<Plus aria-hidden="true" className="size-4" />} onClick={() => setIsAdding(true)}>
      Draw a fragment
    </Button>
  ) : null;
  return (
    <>
      {list.data.fragments.length === 0 ? (
        <EmptyState title="No fragments of your own yet" action={addButton}>
          Draw the pieces your team meets again and again; everybody in the team can pick them.
        </EmptyState>
      ) : (
        <>
          <div className="mb-4 flex justify-end">{addButton}</div>
          <div className={FRAGMENT_GRID}>
            {list.data.fragments.map((fragment) => (
              <FragmentTile
                key={fragment.id}
                name={fragment.name}
                smiles={fragment.smiles}
                actions={
                  fragment.abilities.remove ? (
                    <IconButton
                      label={`Remove ${fragment.name}`}
                      tone="danger"
                      icon={<Trash2 className="size-3.5" />}
                      onClick={() => setRemoving(fragment)}
                    />
                  ) : undefined
                }
              />
            ))}
          </div>
        </>
      )}
      {isAdding ? <NewFragmentDialog teamId={team.teamId} onClose={() => setIsAdding(false)} /> : null}
      {removing === null ? null : (
        <ConfirmDialog
          title={`Remove ${removing.name}`}
          confirmLabel="Remove"
          isDestructive
          isBusy={remove.isPending}
          onCancel={() => setRemoving(null)}
          onConfirm={() =>
            remove.mutate(removing.id, {
              onSuccess: () => showToast('done', `${removing.name} removed.`),
              onSettled: () => setRemoving(null),
            })
          }
        >
          <p>Evidence that uses it keeps its own copy.</p>
        </ConfirmDialog>
      )}
    </>
  );
}
