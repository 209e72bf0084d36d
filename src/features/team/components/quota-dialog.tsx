import { useId, useState, type FormEvent } from 'react';
import { quotaOverrideRequest } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { NumberInput } from '../../../components/number-input';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage, issueFor } from '../../../lib/api-error';
import { useSetQuota, type QuotaFigures, type UsageRow } from '../api/team';

const FIELDS: ReadonlyArray<{ key: keyof QuotaFigures; label: string; unit?: string; expected: string }> = [
  { key: 'cpuSecondsPerMonth', label: 'CPU time a month', unit: 's', expected: 'expected a whole number of seconds from 0' },
  { key: 'candidatesPerRun', label: 'Candidates a run', expected: 'expected a whole number between 1 and 10 000' },
  { key: 'runsAtOnce', label: 'Runs at once', expected: 'expected a whole number between 0 and 100' },
];

/** Sets figures for one person beside those of the role, or goes back to the role. */
export function QuotaDialog({ teamId, person, onClose }: { teamId: string; person: UsageRow; onClose: () => void }) {
  const formId = useId();
  const [figures, setFigures] = useState<Record<keyof QuotaFigures, number | null>>({ ...person.quota });
  const [issues, setIssues] = useState<Readonly<Record<string, string>>>({});
  const setQuota = useSetQuota(teamId);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    // An empty field leaves that figure to the role.
    const given = Object.fromEntries(Object.entries(figures).filter(([, value]) => value !== null));
    const parsed = quotaOverrideRequest.safeParse(given);
    setIssues(
      Object.fromEntries(
        (parsed.error?.issues ?? []).map((issue) => [
          String(issue.path[0]),
          FIELDS.find((field) => field.key === issue.path[0])?.expected ?? issue.message,
        ]),
      ),
    );
    if (!parsed.success) return;
    const quota: Partial<QuotaFigures> = {};
    for (const { key } of FIELDS) {
      const value = parsed.data[key];
      if (value !== undefined) quota[key] = value;
    }
    setQuota.mutate({ userId: person.userId, quota }, { onSuccess: onClose });
  };
  return (
    <Dialog
      title={`Quota of ${person.name}`}
      width="narrow"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form={formId} variant="primary" isBusy={setQuota.isPending}>
            Set quota
          </Button>
        </>
      }
    >
      <form id={formId} noValidate onSubmit={submit} className="space-y-4">
        {FIELDS.map(({ key, label, unit }) => (
          <NumberInput
            key={key}
            label={label}
            {...(unit === undefined ? {} : { unit })}
            value={figures[key]}
            error={issues[key] ?? issueFor(setQuota.error, key)}
            onValueChange={(value) => setFigures({ ...figures, [key]: value })}
          />
        ))}
        <p className="flex flex-wrap items-center justify-between gap-2 text-small text-faded">
          An empty field follows the role.
          {person.isOverridden ? (
            <Button
              size="small"
              variant="quiet"
              disabled={setQuota.isPending}
              onClick={() => setQuota.mutate({ userId: person.userId, quota: {} }, { onSuccess: onClose })}
            >
              Back to the role
            </Button>
          ) : null}
        </p>
        {setQuota.isError && !(setQuota.error instanceof ApiError && setQuota.error.issues.length > 0) ? (
          <Notice tone="madder">{errorMessage(setQuota.error)}</Notice>
        ) : null}
      </form>
    </Dialog>
  );
}
