import { CircleStop, WifiOff } from 'lucide-react';
import { useState } from 'react';
import { Button } from '../../../components/button';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { FunnelPicture } from '../../../components/funnel/funnel-picture';
import { bandFromFunnel, bandFromProgress } from '../../../components/funnel/funnel-stages';
import { Panel } from '../../../components/panel';
import { StatusWord } from '../../../components/status-word';
import { formatRoughSeconds, formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import type { Run, RunProgress } from '../../../lib/queries/run-queries';
import { useCancelRun } from '../api/use-cancel-run';

const STAGE_WORDS: Readonly<Record<RunProgress['stage'], string>> = {
  planning: 'Planning the shards',
  enumerating: 'Weaving constitutions',
  ranking: 'Ranking the candidates',
  done: 'Finishing',
};

/** Rate and time left speak of constitutions still to be built; afterwards they would read as a standstill. */
const isWeaving = (stage: RunProgress['stage']) => stage === 'planning' || stage === 'enumerating';

function Figure({ label, value }: { label: string; value: string }) {
  return (
    <div className="min-w-0">
      <dt className="text-small text-faded">{label}</dt>
      <dd className="tabular text-lead font-semibold whitespace-nowrap">{value}</dd>
    </div>
  );
}

/** A run that waits or goes on: what it does, how far it is, what is left. */
export function RunLive({ run, stream }: { run: Run; stream: 'connected' | 'reconnecting' }) {
  const cancel = useCancelRun(run.id);
  const [isAsking, setIsAsking] = useState(false);
  const { progress } = run;
  const band = run.funnel === null ? bandFromProgress(progress) : bandFromFunnel(run.funnel);
  const shardShare = progress === null || progress.shardCount === 0 ? 0 : progress.shardsDone / progress.shardCount;
  const figure = (value: (progress: RunProgress) => string) => (progress === null ? '–' : value(progress));
  return (
    <Panel
      title={
        <span role="status">
          {run.status === 'queued' ? 'Waiting for a free worker' : progress === null ? 'Starting' : STAGE_WORDS[progress.stage]}
        </span>
      }
      actions={
        <>
          {stream === 'reconnecting' ? (
            <StatusWord tone="weld" icon={WifiOff}>
              Reconnecting; figures may be old
            </StatusWord>
          ) : null}
          {run.abilities.cancel ? (
            <Button
              size="small"
              icon={<CircleStop aria-hidden="true" className="size-4" />}
              isBusy={cancel.isPending}
              onClick={() => setIsAsking(true)}
            >
              Cancel run
            </Button>
          ) : null}
        </>
      }
    >
      <div
        role="progressbar"
        aria-label="Shards done"
        aria-valuemin={0}
        aria-valuemax={progress?.shardCount ?? 0}
        aria-valuenow={progress?.shardsDone ?? 0}
        className="mb-4 h-1 overflow-hidden rounded-full bg-seam"
      >
        <div className="h-full bg-indigo transition-[width]" style={{ width: `${shardShare * 100}%` }} />
      </div>
      <dl className="mb-6 grid grid-cols-2 gap-x-6 gap-y-3 tablet:grid-cols-3 desk:grid-cols-6">
        <Figure
          label="Shards done"
          value={figure(({ shardsDone, shardCount }) => `${formatCount(shardsDone)} of ${formatCount(shardCount)}`)}
        />
        <Figure label="Constitutions seen" value={figure(({ constitutionsSeen }) => formatCount(constitutionsSeen))} />
        <Figure label="Kept so far" value={figure(({ survivors }) => formatCount(Math.min(survivors, run.settings.keep)))} />
        <Figure
          label="Rate"
          value={figure(({ stage, ratePerSecond }) => (isWeaving(stage) ? `${formatCount(ratePerSecond)}\u2009/\u2009s` : '–'))}
        />
        <Figure label="Elapsed" value={figure(({ elapsedSeconds }) => formatSeconds(elapsedSeconds))} />
        <Figure
          label="Time left"
          value={figure(({ stage, secondsLeft }) =>
            !isWeaving(stage) ? '–' : secondsLeft === null ? 'not known yet' : `about ${formatRoughSeconds(secondsLeft)}`,
          )}
        />
      </dl>
      <FunnelPicture band={band} isLive />
      {isAsking ? (
        <ConfirmDialog
          title="Cancel this run?"
          confirmLabel="Cancel run"
          isDestructive
          isBusy={cancel.isPending}
          onCancel={() => setIsAsking(false)}
          onConfirm={() => cancel.mutate(undefined, { onSettled: () => setIsAsking(false) })}
        >
          <p>It stops within a second. The CPU time used so far is charged; the list it leaves is incomplete.</p>
        </ConfirmDialog>
      ) : null}
    </Panel>
  );
}
