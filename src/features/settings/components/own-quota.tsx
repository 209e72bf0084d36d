import { useQuery } from '@tanstack/react-query';
import { Meter } from '../../../components/meter';
import { ErrorState, LoadingState } from '../../../components/states';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import { ownQuotaQuery } from '../api/account';

/** What the person may use in one team, and what is used of it. */
export function OwnQuota({ teamId }: { teamId: string }) {
  const standing = useQuery(ownQuotaQuery(teamId));
  if (standing.isPending) return <LoadingState label="Loading the quota" lines={2} className="p-0" />;
  if (standing.isError)
    return <ErrorState title="The quota could not be loaded" error={standing.error} onRetry={() => void standing.refetch()} />;
  const { quota, usedCpuSeconds, reservedCpuSeconds, runningCount } = standing.data;
  return (
    <div className="space-y-3">
      <Meter
        label="CPU time this month"
        used={usedCpuSeconds}
        reserved={reservedCpuSeconds}
        limit={quota.cpuSecondsPerMonth}
        text={`${formatSeconds(usedCpuSeconds)} of ${formatSeconds(quota.cpuSecondsPerMonth)} CPU time this month${reservedCpuSeconds > 0 ? `, ${formatSeconds(reservedCpuSeconds)} reserved` : ''}`}
      />
      <p className="text-table text-faded">
        {formatCount(runningCount)} of {formatCount(quota.runsAtOnce)} runs at once · up to {formatCount(quota.candidatesPerRun)} candidates
        a run
      </p>
    </div>
  );
}
