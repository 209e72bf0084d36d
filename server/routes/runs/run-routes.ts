import type { AppContext } from '../../app-context.js';
import { cancelRun } from '../../commands/cancel-run.js';
import { estimateRun } from '../../commands/estimate-run.js';
import { explainStructure } from '../../commands/explain-structure.js';
import { startRun } from '../../commands/start-run.js';
import type { Run } from '../../models/run.js';
import { Team } from '../../models/team.js';
import type { Actor } from '../../policies/actor.js';
import { authorize } from '../../policies/authorize.js';
import { presentRun } from '../../presenters/run.js';
import { findRun, listRunsOfTeam, listRunsOfUnknown } from '../../queries/runs.js';
import { findUnknown } from '../../queries/unknowns.js';
import { route, streamRoute, type Route } from '../route.js';
import { sendCandidates } from './send-candidates.js';
import { streamRunEvents } from './stream-run-events.js';

export function runRoutes(context: AppContext): Route[] {
  const present = (actor: Actor, run: Run) => presentRun(actor, run, context.queue?.progress(run.id) ?? null);
  const presentOne = async (actor: Actor, runId: string) => present(actor, authorize(actor, 'run.read', await findRun(actor, runId)));

  return [
    route(
      'startRun',
      async ({ actor, params, body }) => {
        const unknown = authorize(actor, 'unknown.startRun', await findUnknown(actor, params.unknownId));
        const { id } = await startRun(context, actor, unknown.id, body);
        return await presentOne(actor, id);
      },
      { status: 201 },
    ),
    route('listRuns', async ({ actor, params }) => {
      const unknown = authorize(actor, 'unknown.read', await findUnknown(actor, params.unknownId));
      const runs = await listRunsOfUnknown(unknown.id);
      return { runs: runs.map((run) => present(actor, run)) };
    }),
    route('listTeamRuns', async ({ actor, params, query }) => {
      const team = authorize(actor, 'team.readRuns', await Team.findByPk(params.teamId));
      const { rows, total } = await listRunsOfTeam(team.id, query);
      return { rows: rows.map((run) => present(actor, run)), total, page: query.page, pageSize: query.pageSize };
    }),
    route('estimateRun', async ({ actor, params, body }) => {
      const unknown = authorize(actor, 'unknown.startRun', await findUnknown(actor, params.unknownId));
      return await estimateRun(context, actor, unknown, body);
    }),
    route('readRun', async ({ actor, params }) => await presentOne(actor, params.runId)),
    route('cancelRun', async ({ actor, params }) => {
      const run = authorize(actor, 'run.cancel', await findRun(actor, params.runId));
      await cancelRun(context, actor, run);
      return await presentOne(actor, run.id);
    }),
    route('explainStructure', async ({ actor, params, body }) => {
      const run = authorize(actor, 'run.explain', await findRun(actor, params.runId));
      return await explainStructure(context, run, body.smiles);
    }),
    streamRoute('runEvents', async ({ actor, params, request, response }) => {
      const run = authorize(actor, 'run.read', await findRun(actor, params.runId));
      await streamRunEvents(context, actor, run, request, response);
    }),
    streamRoute('exportCandidates', async ({ actor, params, query, response }) => {
      const run = authorize(actor, 'run.export', await findRun(actor, params.runId));
      await sendCandidates(context, run, query, response);
    }),
  ];
}
