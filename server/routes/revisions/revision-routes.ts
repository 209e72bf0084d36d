import type { AppContext } from '../../app-context.js';
import { restoreRevision, saveRevision } from '../../commands/save-revision.js';
import type { Actor } from '../../policies/actor.js';
import { authorize } from '../../policies/authorize.js';
import { presentRevision, presentRevisionRow } from '../../presenters/revision.js';
import { findRevision, listRevisions } from '../../queries/revisions.js';
import { findUnknown } from '../../queries/unknowns.js';
import { route, type Route } from '../route.js';

export function revisionRoutes(context: AppContext): Route[] {
  return [
    route('listRevisions', async ({ actor, params }) => {
      const unknown = authorize(actor, 'unknown.read', await findUnknown(actor, params.unknownId));
      const revisions = await listRevisions(unknown.id);
      return { revisions: revisions.map((revision) => presentRevisionRow(revision, unknown.currentRevisionId)) };
    }),
    route(
      'createRevision',
      async ({ actor, params, body }) => {
        const unknown = authorize(actor, 'unknown.saveEvidence', await findUnknown(actor, params.unknownId));
        const revision = await saveRevision(context, actor, unknown.id, body);
        return await presentOne(actor, revision.id);
      },
      { status: 201 },
    ),
    route('readRevision', async ({ actor, params }) => await presentOne(actor, params.revisionId)),
    route(
      'restoreRevision',
      async ({ actor, params }) => {
        const old = authorize(actor, 'revision.restore', await findRevision(actor, params.revisionId));
        const revision = await restoreRevision(context, actor, old);
        return await presentOne(actor, revision.id);
      },
      { status: 201 },
    ),
  ];
}

async function presentOne(actor: Actor, revisionId: string) {
  return presentRevision(actor, authorize(actor, 'revision.read', await findRevision(actor, revisionId)));
}
