import { AuditEvent } from '../../models/audit-event.js';
import { authorize } from '../../policies/authorize.js';
import { INSTALLATION } from '../../policies/policies.js';
import { presentAuditEvent } from '../../presenters/audit-event.js';
import { route, type Route } from '../route.js';

export function auditRoutes(): Route[] {
  return [
    route('listAudit', async ({ actor, query }) => {
      authorize(actor, 'installation.readAudit', INSTALLATION);
      const { page, pageSize } = query;
      const { rows, count } = await AuditEvent.findAndCountAll({
        order: [
          ['at', 'DESC'],
          ['id', 'ASC'],
        ],
        limit: pageSize,
        offset: (page - 1) * pageSize,
      });
      return { rows: rows.map(presentAuditEvent), total: count, page, pageSize };
    }),
  ];
}
