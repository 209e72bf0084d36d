import { useQuery } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import { parseExcludedPattern } from '../../../../shared/chemistry/excluded-pattern';
import { parseFragment } from '../../../../shared/chemistry/fragment';
import { exactQueryOf } from '../../../../shared/chemistry/fragment-query';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { TextInput } from '../../../components/field';
import { FRAGMENT_GRID, FragmentLibrary } from '../../../components/fragments/fragment-library';
import { FragmentTile } from '../../../components/fragments/fragment-tile';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { StructureEditor } from '../../../components/structure/structure-editor';
import { Tabs } from '../../../components/tabs';
import { teamFragmentsQuery } from '../../../lib/queries/fragment-queries';

export interface PickedFragment {
  name: string;
  smiles: string;
}
type Source = 'library' | 'team' | 'draw';

/** A fragment to exclude is a query: its own hydrogens count, or hydroxy would exclude every ether. */
function asQuery(smiles: string): string {
  const parsed = parseFragment(smiles);
  return parsed.ok ? exactQueryOf(parsed.fragment) : smiles;
}

/** What is wrong with a drawn fragment for its purpose; undefined = nothing. */
function faultOf(text: string, purpose: 'required' | 'excluded'): string | undefined {
  if (purpose === 'excluded') {
    const pattern = parseExcludedPattern(text);
    return pattern.kind === 'fault' ? pattern.message : undefined;
  }
  const fragment = parseFragment(text);
  if (!fragment.ok) return fragment.message;
  return fragment.fragment.attachments.length === 0
    ? 'expected at least one attachment point; choose an atom below to open a bond there'
    : undefined;
}

/** Chooses fragments from the built-in library, the team's own, or by drawing; stays open until closed. */
export function FragmentPicker({
  purpose,
  teamId,
  budget,
  onPick,
  onClose,
}: {
  purpose: 'required' | 'excluded';
  teamId: string;
  budget: ReactNode;
  onPick: (fragment: PickedFragment) => void;
  onClose: () => void;
}) {
  const [source, setSource] = useState<Source>('library');
  const [added, setAdded] = useState<readonly string[]>([]);
  const take = ({ name, smiles }: PickedFragment) => {
    onPick({ name, smiles: purpose === 'excluded' && source !== 'draw' ? asQuery(smiles) : smiles });
    setAdded((names) => [...names, name === '' ? 'drawn fragment' : name]);
  };
  return (
    <Dialog
      title={purpose === 'required' ? 'Add required fragments' : 'Add excluded fragments'}
      width="wide"
      onClose={onClose}
      footer={
        <>
          <div className="mr-auto min-w-0 flex-1 basis-60 self-center text-table">
            <p role="status" className="truncate">
              {added.length === 0 ? null : (
                <>
                  <span className="text-faded">added </span>
                  {added.join(', ')}
                </>
              )}
            </p>
            {purpose === 'required' ? budget : null}
          </div>
          <Button variant="primary" onClick={onClose}>
            Done
          </Button>
        </>
      }
    >
      <Tabs
        label="Where the fragment comes from"
        items={[
          { key: 'library', label: 'Common fragments' },
          { key: 'team', label: 'Team fragments' },
          { key: 'draw', label: 'Draw' },
        ]}
        current={source}
        onSelect={setSource}
      >
        {source === 'library' ? (
          <FragmentLibrary actionVerb="Add" onPick={take} />
        ) : source === 'team' ? (
          <TeamFragments teamId={teamId} onPick={take} />
        ) : (
          <DrawnFragment purpose={purpose} onPick={take} />
        )}
      </Tabs>
    </Dialog>
  );
}

function TeamFragments({ teamId, onPick }: { teamId: string; onPick: (fragment: PickedFragment) => void }) {
  const list = useQuery(teamFragmentsQuery(teamId));
  if (list.isPending) return <LoadingState label="Loading the team's fragments" />;
  if (list.isError) return <ErrorState error={list.error} onRetry={() => void list.refetch()} />;
  if (list.data.fragments.length === 0)
    return <EmptyState title="No team fragments yet">Fragments that your team keeps under Fragments can be picked here.</EmptyState>;
  return (
    <div className={FRAGMENT_GRID}>
      {list.data.fragments.map((fragment) => (
        <FragmentTile
          key={fragment.id}
          name={fragment.name}
          smiles={fragment.smiles}
          actionLabel={`Add ${fragment.name}`}
          onPick={() => onPick(fragment)}
        />
      ))}
    </div>
  );
}

function DrawnFragment({ purpose, onPick }: { purpose: 'required' | 'excluded'; onPick: (fragment: PickedFragment) => void }) {
  const [smiles, setSmiles] = useState('');
  const [name, setName] = useState('');
  const text = smiles.trim();
  const error = text === '' ? undefined : faultOf(text, purpose);
  return (
    <div className="space-y-4">
      <StructureEditor
        label="Fragment"
        kind={purpose === 'required' ? 'fragment' : 'structure'}
        value={smiles}
        onValueChange={setSmiles}
        error={error}
        height={300}
      />
      <div className="flex flex-wrap items-end gap-3">
        <TextInput label="Name (optional)" className="w-64" maxLength={80} value={name} onChange={(event) => setName(event.target.value)} />
        <Button
          variant="secondary"
          disabled={text === '' || error !== undefined}
          onClick={() => onPick({ name: name.trim(), smiles: text })}
        >
          Add this fragment
        </Button>
      </div>
    </div>
  );
}
