import { useId, useState, type FormEvent } from 'react';
import { teamUpdateRequest } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { TextInput } from '../../../components/field';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { useRenameTeam } from '../api/team';

export function RenameTeamDialog({ teamId, name, onClose }: { teamId: string; name: string; onClose: () => void }) {
  const formId = useId();
  const [text, setText] = useState(name);
  const [issue, setIssue] = useState<string>();
  const rename = useRenameTeam(teamId);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = teamUpdateRequest.safeParse({ name: text });
    setIssue(parsed.error?.issues[0]?.message);
    if (parsed.success) rename.mutate(parsed.data.name, { onSuccess: onClose });
  };
  return (
    <Dialog
      title="Rename team"
      width="narrow"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form={formId} variant="primary" isBusy={rename.isPending}>
            Rename
          </Button>
        </>
      }
    >
      <form id={formId} noValidate onSubmit={submit}>
        <TextInput
          label="Name"
          autoFocus
          maxLength={120}
          value={text}
          error={issue ?? issueFor(rename.error, 'name') ?? (rename.isError ? errorMessage(rename.error) : undefined)}
          onChange={(event) => setText(event.target.value)}
        />
      </form>
    </Dialog>
  );
}
