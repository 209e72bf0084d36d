import { useId, useState, type FormEvent } from 'react';
import { unknownCreateRequest } from '../../../../shared/schemas/unknowns';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Select, type SelectOption, TextArea, TextInput } from '../../../components/field';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage, issueFor } from '../../../lib/api-error';
import type { UnknownFields } from '../api/unknowns';
import { RegulatedCaution } from './regulated-caution';

interface UnknownFormDialogProps {
  title: string;
  submitLabel: string;
  initial: UnknownFields;
  isBusy: boolean;
  error: Error | null;
  onSubmit: (fields: UnknownFields) => void;
  onClose: () => void;
}

const PURPOSES: ReadonlyArray<SelectOption<UnknownFields['purpose']>> = [
  { value: 'research', label: 'Research' },
  { value: 'regulated', label: 'Regulated (quality, residues, forensic, clinical, anti-doping)' },
];

/** Title, description and purpose, for a new unknown and for changing one. */
export function UnknownFormDialog({ title, submitLabel, initial, isBusy, error, onSubmit, onClose }: UnknownFormDialogProps) {
  const formId = useId();
  const [fields, setFields] = useState(initial);
  const [issues, setIssues] = useState<Readonly<Record<string, string>>>({});
  const messageFor = (field: keyof UnknownFields) => issues[field] ?? issueFor(error, field);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = unknownCreateRequest.safeParse(fields);
    setIssues(Object.fromEntries((parsed.error?.issues ?? []).map((issue) => [String(issue.path[0]), issue.message])));
    if (parsed.success) onSubmit(parsed.data);
  };
  return (
    <Dialog
      title={title}
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form={formId} variant="primary" isBusy={isBusy}>
            {submitLabel}
          </Button>
        </>
      }
    >
      <form id={formId} noValidate onSubmit={submit} className="space-y-4">
        <TextInput
          label="Title"
          autoFocus
          maxLength={160}
          hint="What people call it: batch, impurity, isolate."
          value={fields.title}
          error={messageFor('title')}
          onChange={(event) => setFields({ ...fields, title: event.target.value })}
        />
        <TextArea
          label="Description"
          rows={4}
          maxLength={4000}
          hint="Origin, work-up, what was tried so far."
          value={fields.description}
          error={messageFor('description')}
          onChange={(event) => setFields({ ...fields, description: event.target.value })}
        />
        <Select label="Purpose" options={PURPOSES} value={fields.purpose} onValueChange={(purpose) => setFields({ ...fields, purpose })} />
        {fields.purpose === 'regulated' ? <RegulatedCaution /> : null}
        {error !== null && (!(error instanceof ApiError) || error.issues.length === 0) ? (
          <Notice tone="madder">{errorMessage(error)}</Notice>
        ) : null}
      </form>
    </Dialog>
  );
}
