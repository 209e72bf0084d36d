import { Plus } from 'lucide-react';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { useCreateUnknown } from '../api/unknowns';
import { UnknownFormDialog } from './unknown-form-dialog';

/** Creates an unknown and opens its evidence. */
export function NewUnknownButton({ teamId }: { teamId: string }) {
  const [isOpen, setIsOpen] = useState(false);
  const create = useCreateUnknown(teamId);
  const navigate = useNavigate();
  return (
    <>
      <Button
        variant="primary"
        icon={<Plus aria-hidden="true" className="size-4" />}
        onClick={() => {
          create.reset();
          setIsOpen(true);
        }}
      >
        New unknown
      </Button>
      {isOpen ? (
        <UnknownFormDialog
          title="New unknown"
          submitLabel="Create unknown"
          initial={{ title: '', description: '', purpose: 'research' }}
          isBusy={create.isPending}
          error={create.error}
          onClose={() => setIsOpen(false)}
          onSubmit={(fields) => create.mutate(fields, { onSuccess: (created) => void navigate(paths.unknownEvidence(created.id)) })}
        />
      ) : null}
    </>
  );
}
