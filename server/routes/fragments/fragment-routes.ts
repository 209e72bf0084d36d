import type { AppContext } from '../../app-context.js';
import { addTeamFragment } from '../../commands/add-team-fragment.js';
import { removeTeamFragment } from '../../commands/remove-team-fragment.js';
import { Team } from '../../models/team.js';
import { authorize } from '../../policies/authorize.js';
import { presentTeamFragment } from '../../presenters/team-fragment.js';
import { findFragment, listFragments } from '../../queries/fragments.js';
import { route, type Route } from '../route.js';

export function fragmentRoutes(context: AppContext): Route[] {
  return [
    route('listTeamFragments', async ({ actor, params }) => {
      const team = authorize(actor, 'team.readFragments', await Team.findByPk(params.teamId));
      const fragments = await listFragments(team.id);
      return { fragments: fragments.map((fragment) => presentTeamFragment(actor, fragment)) };
    }),
    route(
      'createTeamFragment',
      async ({ actor, params, body }) => {
        const team = authorize(actor, 'team.createFragment', await Team.findByPk(params.teamId));
        const { id } = await addTeamFragment(context, actor, team.id, body);
        return presentTeamFragment(actor, authorize(actor, 'fragment.read', await findFragment(actor, id)));
      },
      { status: 201 },
    ),
    route('removeTeamFragment', async ({ actor, params }) => {
      await removeTeamFragment(context, actor, authorize(actor, 'fragment.remove', await findFragment(actor, params.fragmentId)));
    }),
  ];
}
