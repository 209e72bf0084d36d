import type { z } from 'zod';
import type { auditRow } from '../../shared/schemas/people.js';
import type { AuditEvent } from '../models/audit-event.js';

export function presentAuditEvent(event: AuditEvent): z.input<typeof auditRow> {
  return {
    id: event.id,
    at: event.at.toISOString(),
    actor: event.actorName,
    action: event.action,
    subject: event.subject,
    teamId: event.teamId,
    detail: event.detail,
  };
}
