import { classNames } from '../../../lib/class-names';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import type { OwnQuota } from '../api/run-setup-queries';

/** What is left of the own quota: a thread for the month, and the two other limits in words. */
export function QuotaStanding({ standing }: { standing: OwnQuota }) {
  const { quota, usedCpuSeconds, reservedCpuSeconds, runningCount } = standing;
  const share = (seconds: number) => `${quota.cpuSecondsPerMonth === 0 ? 100 : Math.min(100, (seconds / quota.cpuSecondsPerMonth) * 100)}%`;
  const isSpent = usedCpuSeconds + reservedCpuSeconds >= quota.cpuSecondsPerMonth;
  return (
    <dl className="tabular grid gap-x-6 gap-y-2 text-table tablet:grid-cols-[1fr_auto_auto]">
      <div>
        <dt className="text-faded">CPU time this month</dt>
        <dd>
          <span className={classNames(isSpent && 'font-semibold text-madder')}>{formatSeconds(usedCpuSeconds)}</span>
          {reservedCpuSeconds > 0 ? ` and ${formatSeconds(reservedCpuSeconds)} reserved` : ''} of {formatSeconds(quota.cpuSecondsPerMonth)}
          <span aria-hidden="true" className="relative mt-1 block h-1 overflow-hidden rounded-full bg-seam">
            <span className="absolute inset-y-0 left-0 bg-selvage" style={{ width: share(usedCpuSeconds + reservedCpuSeconds) }} />
            <span
              className={classNames('absolute inset-y-0 left-0', isSpent ? 'bg-madder' : 'bg-ink')}
              style={{ width: share(usedCpuSeconds) }}
            />
          </span>
        </dd>
      </div>
      <div>
        <dt className="text-faded">Runs at once</dt>
        <dd>
          {formatCount(runningCount)} of {formatCount(quota.runsAtOnce)}
        </dd>
      </div>
      <div>
        <dt className="text-faded">Candidates a run</dt>
        <dd>up to {formatCount(quota.candidatesPerRun)}</dd>
      </div>
    </dl>
  );
}
