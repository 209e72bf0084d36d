import type { AppContext } from '../../app-context.js';
import { createTeam } from '../../commands/create-team.js';
import { renameTeam } from '../../commands/rename-team.js';
import { Team } from '../../models/team.js';
import { teamIdsOf } from '../../policies/actor.js';
import { authorize, can } from '../../policies/authorize.js';
import { INSTALLATION } from '../../policies/policies.js';
import { presentTeam } from '../../presenters/team.js';
import { findOwnQuota, findTeamUsage } from '../../queries/usage.js';
import { route, type Route } from '../route.js';

export function teamRoutes(context: AppContext): Route[] {
  const { sequelize } = context;
  return [
    route('listTeams', async ({ actor }) => {
      const where = can(actor, 'installation.manageUsers', INSTALLATION) ? {} : { id: teamIdsOf(actor) };
      const teams = await Team.findAll({ where, order: [['name', 'ASC']] });
      return { teams: teams.map((team) => presentTeam(actor, team)) };
    }),
    route(
      'createTeam',
      async ({ actor, body }) => {
        authorize(actor, 'installation.createTeam', INSTALLATION);
        return presentTeam(actor, await createTeam(context, actor, body.name));
      },
      { status: 201 },
    ),
    route('readTeam', async ({ actor, params }) => presentTeam(actor, authorize(actor, 'team.read', await Team.findByPk(params.teamId)))),
    route('updateTeam', async ({ actor, params, body }) => {
      const team = authorize(actor, 'team.update', await Team.findByPk(params.teamId));
      return presentTeam(actor, await renameTeam(context, actor, team, body.name));
    }),
    route('readUsage', async ({ actor, params }) => {
      const team = authorize(actor, 'team.readUsage', await Team.findByPk(params.teamId));
      return await findTeamUsage(sequelize, team.id, new Date());
    }),
    route('readOwnQuota', async ({ actor, params }) => {
      const team = authorize(actor, 'team.readOwnQuota', await Team.findByPk(params.teamId));
      return await findOwnQuota(sequelize, team.id, actor.userId, new Date());
    }),
  ];
}
