import { Archive, ArchiveRestore, Pencil } from 'lucide-react';
import { useState } from 'react';
import { UNKNOWN_STATUSES, type UnknownStatus } from '../../../../shared/types/states';
import { Button } from '../../../components/button';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { Select } from '../../../components/field';
import { UNKNOWN_STATUS_LOOKS, UnknownStatusWord } from '../../../components/status-word';
import { errorMessage } from '../../../lib/api-error';
import { showToast } from '../../../lib/toasts';
import type { UnknownDetail } from '../../../lib/unknown-queries';
import { useUpdateUnknown } from '../api/unknowns';
import { UnknownFormDialog } from './unknown-form-dialog';

/** Shelving has a button and a question of its own. */
const SETTABLE: readonly UnknownStatus[] = UNKNOWN_STATUSES.filter((status) => status !== 'shelved');

/** Where the unknown stands; a choice for those who may change it. */
export function RecordStatus({ unknown }: { unknown: UnknownDetail }) {
  const update = useUpdateUnknown(unknown.id);
  if (!unknown.abilities.update || unknown.status === 'shelved') return <UnknownStatusWord status={unknown.status} />;
  return (
    <Select
      label="Status"
      isLabelHidden
      controlClassName="min-h-8 py-0.5"
      options={SETTABLE.map((status) => ({ value: status, label: UNKNOWN_STATUS_LOOKS[status].word }))}
      value={update.isPending ? (update.variables.status ?? unknown.status) : unknown.status}
      disabled={update.isPending}
      onValueChange={(status) => update.mutate({ status })}
    />
  );
}

export function RecordActions({ unknown }: { unknown: UnknownDetail }) {
  const [open, setOpen] = useState<'edit' | 'shelve' | null>(null);
  const update = useUpdateUnknown(unknown.id, { showsOwnErrors: true });
  const close = () => setOpen(null);
  const start = (what: 'edit' | 'shelve') => {
    update.reset();
    setOpen(what);
  };
  const isShelved = unknown.status === 'shelved';
  if (!unknown.abilities.update && !unknown.abilities.shelve) return null;
  return (
    <div className="flex flex-wrap gap-2">
      {unknown.abilities.update ? (
        <Button size="small" icon={<Pencil aria-hidden="true" className="size-3.5" />} onClick={() => start('edit')}>
          Edit record
        </Button>
      ) : null}
      {unknown.abilities.shelve ? (
        isShelved ? (
          <Button
            size="small"
            icon={<ArchiveRestore aria-hidden="true" className="size-3.5" />}
            isBusy={update.isPending}
            onClick={() =>
              update.mutate(
                { status: unknown.lastRun === null ? 'new' : 'inProgress' },
                {
                  onSuccess: () => showToast('done', `${unknown.code} is taken up again.`),
                  onError: (error) => showToast('problem', errorMessage(error)),
                },
              )
            }
          >
            Take up again
          </Button>
        ) : (
          <Button size="small" icon={<Archive aria-hidden="true" className="size-3.5" />} onClick={() => start('shelve')}>
            Shelve
          </Button>
        )
      ) : null}
      {open === 'edit' ? (
        <UnknownFormDialog
          title={`Edit ${unknown.code}`}
          submitLabel="Save"
          initial={{ title: unknown.title, description: unknown.description, purpose: unknown.purpose }}
          isBusy={update.isPending}
          error={update.error}
          onClose={close}
          onSubmit={(fields) => update.mutate(fields, { onSuccess: close })}
        />
      ) : null}
      {open === 'shelve' ? (
        <ConfirmDialog
          title={`Shelve ${unknown.code}?`}
          confirmLabel="Shelve"
          isBusy={update.isPending}
          error={update.error === null ? undefined : errorMessage(update.error)}
          onCancel={close}
          onConfirm={() => update.mutate({ status: 'shelved' }, { onSuccess: close })}
        >
          Evidence, runs and shortlist stay as they are. The unknown can be taken up again at any time.
        </ConfirmDialog>
      ) : null}
    </div>
  );
}
