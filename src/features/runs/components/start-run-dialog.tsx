import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { Formula } from '../../../components/chemistry-text';
import { Dialog } from '../../../components/dialog';
import { NumberInput } from '../../../components/number-input';
import { ErrorState, LoadingState } from '../../../components/states';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage } from '../../../lib/api-error';
import { revisionQuery } from '../../../lib/unknown-queries';
import { ownQuotaQuery, type OwnQuota } from '../api/run-setup-queries';
import { useStartRun } from '../api/use-start-run';
import { QuotaStanding } from './quota-standing';
import { RunEstimatePanel } from './run-estimate';
import { checkRunSettings, describeFigure, type RunSettingsDraft } from './run-settings';

interface StartRunDialogProps {
  unknownId: string;
  teamId: string;
  revisionId: string;
  onClose: () => void;
}

/** Asks for the settings of a run over the current evidence, with the size of the search and the own quota in view. */
export function StartRunDialog({ unknownId, teamId, revisionId, onClose }: StartRunDialogProps) {
  const revision = useQuery(revisionQuery(revisionId));
  const quota = useQuery(ownQuotaQuery(teamId));
  const error = revision.error ?? quota.error;
  if (revision.data === undefined || quota.data === undefined) {
    return (
      <Dialog title="Start run" onClose={onClose}>
        {error === null ? (
          <LoadingState label="Loading quota and evidence" lines={8} className="p-0" />
        ) : (
          <ErrorState
            error={error}
            onRetry={() => {
              void revision.refetch();
              void quota.refetch();
            }}
          />
        )}
      </Dialog>
    );
  }
  const { options, formula } = revision.data.evidence;
  return (
    <SettingsForm
      unknownId={unknownId}
      revision={{ id: revisionId, number: revision.data.number, formula }}
      standing={quota.data}
      initial={{
        keep: Math.min(options.keep, quota.data.quota.candidatesPerRun),
        maxSeconds: options.maxSeconds,
        maxConstitutions: options.maxConstitutions ?? null,
      }}
      onClose={onClose}
    />
  );
}

interface SettingsFormProps {
  unknownId: string;
  revision: { readonly id: string; readonly number: number; readonly formula: string };
  standing: OwnQuota;
  initial: RunSettingsDraft;
  onClose: () => void;
}

function SettingsForm({ unknownId, revision, standing, initial, onClose }: SettingsFormProps) {
  const navigate = useNavigate();
  const [draft, setDraft] = useState(initial);
  const start = useStartRun(unknownId);
  const { quota } = standing;
  const check = checkRunSettings(draft, quota.candidatesPerRun);
  const isGood = check.keep === undefined && check.maxSeconds === undefined && check.maxConstitutions === undefined;

  const onSubmit = (event: FormEvent) => {
    event.preventDefault();
    if (!isGood || draft.keep === null) return;
    start.mutate(
      { revisionId: revision.id, keep: draft.keep, maxSeconds: draft.maxSeconds, maxConstitutions: draft.maxConstitutions },
      { onSuccess: (run) => void navigate(paths.run(run.id)) },
    );
  };
  return (
    <Dialog
      title="Start run"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" form="start-run" variant="primary" isBusy={start.isPending} disabled={!isGood}>
            Start run
          </Button>
        </>
      }
    >
      <form id="start-run" onSubmit={onSubmit} noValidate className="space-y-5">
        <div>
          <p className="mb-1 text-faded">
            <Formula formula={revision.formula} className="text-ink" />, evidence revision {revision.number}
          </p>
          <RunEstimatePanel unknownId={unknownId} revisionId={revision.id} settings={draft} candidatesPerRun={quota.candidatesPerRun} />
        </div>
        <div className="grid gap-4 tablet:grid-cols-3">
          <NumberInput
            label="Candidates to keep"
            hint="The best ones; every constitution is counted and weighed all the same."
            value={draft.keep}
            error={check.keep}
            onValueChange={(keep) => setDraft({ ...draft, keep })}
          />
          <NumberInput
            label="Time limit"
            unit="s"
            hint="Empty: no limit. A run that hits it is marked incomplete."
            value={draft.maxSeconds}
            error={check.maxSeconds}
            onValueChange={(maxSeconds) => setDraft({ ...draft, maxSeconds })}
          />
          <NumberInput
            label="Most constitutions"
            hint="Empty: no limit. Beyond it the run stops, incomplete."
            value={draft.maxConstitutions}
            error={check.maxConstitutions}
            onValueChange={(maxConstitutions) => setDraft({ ...draft, maxConstitutions })}
          />
        </div>
        <section aria-label="Your quota" className="border-t border-seam pt-4">
          <QuotaStanding standing={standing} />
        </section>
        {start.error === null ? null : <StartRefusal error={start.error} />}
      </form>
    </Dialog>
  );
}

function StartRefusal({ error }: { error: Error }) {
  const figures = error instanceof ApiError ? Object.entries(error.figures) : [];
  const issues = error instanceof ApiError ? error.issues : [];
  const isQuota = error instanceof ApiError && error.code === 'quotaExceeded';
  return (
    <div role="alert">
      <Notice tone="madder" title={isQuota ? 'Your quota does not allow this run' : 'The run was not started'}>
        <p>{errorMessage(error)}</p>
        {issues.map((issue) => (
          <p key={`${issue.path}${issue.message}`}>
            <span className="font-mono text-small">{issue.path}</span>: {issue.message}
          </p>
        ))}
        {figures.length === 0 ? null : (
          <dl className="tabular mt-2 grid w-fit grid-cols-[auto_auto] gap-x-4 text-table">
            {figures.map(([name, value]) => {
              const figure = describeFigure(name, value);
              return (
                <div key={name} className="contents">
                  <dt>{figure.label}</dt>
                  <dd className="text-right font-semibold">{figure.value}</dd>
                </div>
              );
            })}
          </dl>
        )}
      </Notice>
    </div>
  );
}
