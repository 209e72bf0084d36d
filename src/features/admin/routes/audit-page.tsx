import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { Pagination } from '../../../components/pagination';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { usePageTitle } from '../../../components/use-page-title';
import { classNames } from '../../../lib/class-names';
import { useMe } from '../../../lib/session';
import { auditQuery } from '../api/installation';
import { AdminOnly } from '../components/admin-only';
import { AuditTable } from '../components/audit-table';

export function Component() {
  usePageTitle('Audit');
  return (
    <AdminOnly isAllowed={useMe().abilities.readAudit}>
      <Page />
    </AdminOnly>
  );
}

function Page() {
  const [search, setSearch] = useSearchParams();
  const asked = Number(search.get('page') ?? '1');
  const page = Number.isInteger(asked) && asked >= 1 ? asked : 1;
  const audit = useQuery(auditQuery(page));
  return (
    <>
      <PageHeader title="Audit" lead="Every change in the installation: who, what, when. Newest first; nothing here can be edited." />
      <Panel isFlush>
        {audit.isPending ? (
          <LoadingState label="Loading audit events" lines={10} />
        ) : audit.isError ? (
          <ErrorState title="The audit could not be loaded" error={audit.error} onRetry={() => void audit.refetch()} />
        ) : audit.data.rows.length === 0 ? (
          <EmptyState title="No events on this page">Every sign-in and every change will be written down here.</EmptyState>
        ) : (
          <div className={classNames('transition-opacity', audit.isPlaceholderData && 'opacity-60')}>
            <AuditTable rows={audit.data.rows} />
            <div className="border-t border-seam px-3 py-1.5">
              <Pagination
                page={audit.data.page}
                pageSize={audit.data.pageSize}
                total={audit.data.total}
                onPage={(next) => setSearch(next === 1 ? {} : { page: String(next) })}
              />
            </div>
          </div>
        )}
      </Panel>
    </>
  );
}
