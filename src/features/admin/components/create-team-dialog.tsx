import { useId, useState, type FormEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import { teamCreateRequest } from '../../../../shared/schemas/people';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { TextInput } from '../../../components/field';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { useCreateTeam } from '../api/installation';

/** Creates a team and opens it, because its first member has to be invited next. */
export function CreateTeamDialog({ onClose }: { onClose: () => void }) {
  const formId = useId();
  const navigate = useNavigate();
  const [name, setName] = useState('');
  const [issue, setIssue] = useState<string>();
  const create = useCreateTeam();
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const parsed = teamCreateRequest.safeParse({ name });
    setIssue(parsed.error?.issues[0]?.message);
    if (parsed.success) create.mutate(parsed.data.name, { onSuccess: (team) => void navigate(paths.team(team.id)) });
  };
  return (
    <Dialog
      title="New team"
      width="narrow"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form={formId} variant="primary" isBusy={create.isPending}>
            Create team
          </Button>
        </>
      }
    >
      <form id={formId} noValidate onSubmit={submit}>
        <TextInput
          label="Name"
          autoFocus
          maxLength={120}
          value={name}
          error={issue ?? issueFor(create.error, 'name') ?? (create.isError ? errorMessage(create.error) : undefined)}
          onChange={(event) => setName(event.target.value)}
        />
      </form>
    </Dialog>
  );
}
