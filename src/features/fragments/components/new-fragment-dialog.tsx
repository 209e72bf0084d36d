import { useState } from 'react';
import { parseFragment } from '../../../../shared/chemistry/fragment';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { InlineError, TextInput } from '../../../components/field';
import { StructureEditor } from '../../../components/structure/structure-editor';
import { ApiError, errorMessage } from '../../../lib/api-error';
import { useCreateTeamFragment } from '../../../lib/queries/fragment-queries';
import { showToast } from '../../../lib/toasts';

/** Draw, name and keep a fragment for the team. */
export function NewFragmentDialog({ teamId, onClose }: { teamId: string; onClose: () => void }) {
  const [smiles, setSmiles] = useState('');
  const [name, setName] = useState('');
  const create = useCreateTeamFragment(teamId);
  const parsed = smiles.trim() === '' ? null : parseFragment(smiles);
  const drawingFault =
    parsed === null
      ? undefined
      : !parsed.ok
        ? parsed.message
        : parsed.fragment.attachments.length === 0
          ? 'expected at least one attachment point; choose an atom below to open a bond there'
          : undefined;
  const serverIssue = (path: string) =>
    create.error instanceof ApiError ? create.error.issues.find((issue) => issue.path === path)?.message : undefined;
  const submit = () =>
    create.mutate(
      { name: name.trim(), group: 'Own', smiles: smiles.trim() },
      {
        onSuccess: (created) => {
          showToast('done', `${created.name} is in the team's fragments.`);
          onClose();
        },
      },
    );
  return (
    <Dialog
      title="Draw a fragment"
      width="wide"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button
            variant="primary"
            isBusy={create.isPending}
            disabled={parsed === null || drawingFault !== undefined || name.trim() === ''}
            onClick={submit}
          >
            Keep fragment
          </Button>
        </>
      }
    >
      <div className="space-y-4">
        <TextInput
          label="Name"
          maxLength={80}
          className="max-w-sm"
          value={name}
          error={serverIssue('name')}
          onChange={(event) => setName(event.target.value)}
        />
        <StructureEditor
          label="Fragment"
          kind="fragment"
          value={smiles}
          onValueChange={setSmiles}
          error={drawingFault ?? serverIssue('smiles')}
          height={300}
        />
        <InlineError
          message={
            create.error !== null && !(create.error instanceof ApiError && create.error.issues.length > 0)
              ? errorMessage(create.error)
              : undefined
          }
        />
      </div>
    </Dialog>
  );
}
