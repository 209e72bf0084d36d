import { useQuery } from '@tanstack/react-query';
import { PencilLine } from 'lucide-react';
import type { ReactNode } from 'react';
import { type LimitKind, outlookOf } from '../../../../shared/estimates/outlook';
import { paths } from '../../../app/paths';
import { ButtonLink } from '../../../components/button';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage } from '../../../lib/api-error';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import { estimateQuery, type RunEstimate } from '../api/run-setup-queries';
import { formatEstimate, formatShare, formatSpan } from './estimate-text';
import type { RunSettingsDraft } from './run-settings';
import { ShareBar } from './share-bar';

interface RunEstimateProps {
  unknownId: string;
  revisionId: string;
  settings: RunSettingsDraft;
  candidatesPerRun: number;
}

/** How large the run is expected to be, what that is of the quota, whether it will end, and what would help. */
export function RunEstimatePanel({ unknownId, revisionId, settings, candidatesPerRun }: RunEstimateProps) {
  const { data, error, isPending } = useQuery(estimateQuery(unknownId, revisionId));
  if (isPending) {
    return (
      <p role="status" className="min-h-32 text-faded">
        Probing the size of the search …
      </p>
    );
  }
  if (error !== null) return <EstimateFailure error={error} />;
  return (
    <div className="space-y-4">
      <Figures estimate={data} settings={settings} candidatesPerRun={candidatesPerRun} />
      <Outlook unknownId={unknownId} estimate={data} settings={settings} />
    </div>
  );
}

function Figures({
  estimate,
  settings,
  candidatesPerRun,
}: { estimate: RunEstimate } & Pick<RunEstimateProps, 'settings' | 'candidatesPerRun'>) {
  const { survivors, cpuSeconds, cpuSecondsLow, cpuSecondsHigh, threadCount, cpuSecondsLeft, quotaShare } = estimate;
  const keep = settings.keep ?? candidatesPerRun;
  const kept = Math.min(keep, survivors.estimate);
  return (
    <div>
      <dl className="tabular grid grid-cols-[auto_minmax(0,1fr)] gap-x-5 gap-y-2">
        <Figure label="Constitutions">
          {estimate.isExact ? (
            <>
              <Strong>{formatCount(estimate.estimate)}</Strong> <span className="text-faded">(counted)</span>
            </>
          ) : (
            <>
              <Rough {...estimate} format={formatEstimate} />
            </>
          )}
        </Figure>
        <Figure label="Pass the filters">
          <Rough {...survivors} format={formatEstimate} />
          <span className="block text-small text-faded">
            the best {formatEstimate(kept)} are kept; your quota allows {formatCount(candidatesPerRun)}
          </span>
        </Figure>
        <Figure label="CPU time">
          <Rough estimate={cpuSeconds} low={cpuSecondsLow} high={cpuSecondsHigh} format={formatSpan} />
          {threadCount > 1 ? (
            <span className="block text-small text-faded">
              {formatSpan(cpuSeconds / threadCount)} on {threadCount} threads that nobody else uses
            </span>
          ) : null}
        </Figure>
        <Figure label="Of your quota">
          {quotaShare === null ? (
            <span className="text-madder">nothing is left of this month</span>
          ) : (
            <>
              <Rough {...quotaShare} format={formatShare} />
              <span className="mt-1 mb-1 block">
                <ShareBar share={quotaShare} />
              </span>
              <span className="block text-small text-faded">of the {formatSeconds(cpuSecondsLeft)} of CPU time left this month</span>
            </>
          )}
        </Figure>
      </dl>
      <p className="mt-2 text-small text-faded">
        {estimate.isExact
          ? 'The search is small enough to be counted beforehand.'
          : 'By random probing of the search tree; ranges hold the true value in 19 of 20 cases. The run itself counts exactly.'}
      </p>
    </div>
  );
}

const LIMIT_WORDS: Readonly<Record<LimitKind, string>> = {
  quota: 'what is left of your quota',
  timeLimit: 'the time limit',
  countLimit: 'the limit of constitutions',
};

function Outlook({ unknownId, estimate, settings }: { unknownId: string; estimate: RunEstimate; settings: RunSettingsDraft }) {
  const cpu = { estimate: estimate.cpuSeconds, low: estimate.cpuSecondsLow, high: estimate.cpuSecondsHigh };
  const { kind, limit, excess } = outlookOf(cpu, estimate, {
    cpuSecondsLeft: estimate.cpuSecondsLeft,
    maxSeconds: numberOrNull(settings.maxSeconds),
    maxConstitutions: numberOrNull(settings.maxConstitutions),
    threadCount: estimate.threadCount,
  });
  const backToEvidence = (
    <ButtonLink
      size="small"
      className="mt-2"
      to={paths.unknownEvidence(unknownId)}
      icon={<PencilLine aria-hidden="true" className="size-3.5" />}
    >
      Back to the evidence
    </ButtonLink>
  );
  const hints =
    estimate.hints.length === 0 ? null : (
      <ul className="mt-1 list-disc space-y-0.5 pl-5">
        {estimate.hints.map(({ kind: hintKind, text }) => (
          <li key={hintKind}>{text}</li>
        ))}
      </ul>
    );
  if (kind === 'ends' || limit === null) {
    return hints === null ? null : (
      <details className="text-table">
        <summary className="w-fit rounded-small text-indigo">What would make the search smaller</summary>
        {hints}
        {backToEvidence}
      </details>
    );
  }
  const isHopeless = kind === 'hopeless';
  return (
    <Notice
      tone={isHopeless ? 'madder' : 'weld'}
      title={isHopeless ? `This run will not end within ${LIMIT_WORDS[limit]}` : `This run may not end within ${LIMIT_WORDS[limit]}`}
    >
      <p>
        {isHopeless && Number.isFinite(excess) ? `It needs about ${formatEstimate(excess)} times as much. ` : ''}A run that is stopped by a
        limit keeps what it has found and is marked incomplete: the right structure may not be in it.
      </p>
      {hints === null ? (
        <p className="mt-1">Required fragments, attached hydrogens and 2D pairs narrow a search most.</p>
      ) : (
        <>
          <p className="mt-2 font-semibold">What would help most</p>
          {hints}
          {isHopeless && estimate.hints.every(({ factor }) => factor < excess) ? (
            <p className="mt-1">None of these is enough by itself. Required fragments and 2D pairs narrow a search most.</p>
          ) : null}
        </>
      )}
      {backToEvidence}
    </Notice>
  );
}

const numberOrNull = (value: number | null): number | null => (value === null || Number.isNaN(value) ? null : value);

function EstimateFailure({ error }: { error: Error }) {
  const issues = error instanceof ApiError ? error.issues : [];
  return (
    <Notice tone={issues.length > 0 ? 'madder' : 'weld'} title="The size of the search could not be estimated">
      <p>{errorMessage(error)}</p>
      {issues.map((issue) => (
        <p key={`${issue.path}${issue.message}`}>
          <span className="font-mono text-small">{issue.path}</span>: {issue.message}
        </p>
      ))}
    </Notice>
  );
}

function Figure({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div className="contents">
      <dt className="text-faded">{label}</dt>
      <dd className="min-w-0">{children}</dd>
    </div>
  );
}
function Strong({ children }: { children: ReactNode }) {
  return <strong className="font-semibold whitespace-nowrap">{children}</strong>;
}
/** An estimate with its range, as far as these differ once they are rounded. */
function Rough({ estimate, low, high, format }: { estimate: number; low: number; high: number; format: (value: number) => string }) {
  const text = format(estimate);
  const [from, to] = [format(low), format(high)];
  return (
    <>
      {text.startsWith('<') ? '' : 'about '}
      <Strong>{text}</Strong>
      {from === to ? null : (
        <span className="text-faded">
          {' '}
          <span className="whitespace-nowrap">({from}</span> – <span className="whitespace-nowrap">{to})</span>
        </span>
      )}
    </>
  );
}
