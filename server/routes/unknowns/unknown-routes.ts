import type { AppContext } from '../../app-context.js';
import { createUnknown } from '../../commands/create-unknown.js';
import { updateUnknown } from '../../commands/update-unknown.js';
import { Team } from '../../models/team.js';
import type { Actor } from '../../policies/actor.js';
import { authorize } from '../../policies/authorize.js';
import { presentUnknown, presentUnknownRow } from '../../presenters/unknown.js';
import { countAround, findLastRuns, findUnknown, listUnknowns } from '../../queries/unknowns.js';
import { route, type Route } from '../route.js';

export function unknownRoutes(context: AppContext): Route[] {
  return [
    route('listUnknowns', async ({ actor, params, query }) => {
      const team = authorize(actor, 'team.readUnknowns', await Team.findByPk(params.teamId));
      const { rows, total } = await listUnknowns(team.id, query);
      const lastRuns = await findLastRuns(rows.map(({ id }) => id));
      return {
        rows: rows.map((unknown) => presentUnknownRow(unknown, lastRuns.get(unknown.id))),
        total,
        page: query.page,
        pageSize: query.pageSize,
      };
    }),
    route(
      'createUnknown',
      async ({ actor, params, body }) => {
        const team = authorize(actor, 'team.createUnknown', await Team.findByPk(params.teamId));
        const unknown = await createUnknown(context, actor, team.id, body);
        return await presentOne(actor, unknown.id);
      },
      { status: 201 },
    ),
    route('readUnknown', async ({ actor, params }) => await presentOne(actor, params.unknownId)),
    route('updateUnknown', async ({ actor, params, body }) => {
      const unknown = authorize(
        actor,
        body.status === 'shelved' ? 'unknown.shelve' : 'unknown.update',
        await findUnknown(actor, params.unknownId),
      );
      await updateUnknown(context, actor, unknown, body);
      return await presentOne(actor, unknown.id);
    }),
  ];
}

async function presentOne(actor: Actor, unknownId: string) {
  const unknown = authorize(actor, 'unknown.read', await findUnknown(actor, unknownId));
  const [lastRuns, counts] = await Promise.all([findLastRuns([unknownId]), countAround(unknownId)]);
  return presentUnknown(actor, unknown, lastRuns.get(unknownId), counts);
}
