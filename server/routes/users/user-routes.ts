import type { AppContext } from '../../app-context.js';
import { issueResetLink } from '../../commands/issue-reset-link.js';
import { updateUser } from '../../commands/update-user.js';
import { User } from '../../models/user.js';
import { authorize } from '../../policies/authorize.js';
import { INSTALLATION } from '../../policies/policies.js';
import { presentUser } from '../../presenters/user.js';
import { findUsers, findUserWithTeams } from '../../queries/users.js';
import { route, type Route } from '../route.js';

export function userRoutes(context: AppContext): Route[] {
  return [
    route('listUsers', async ({ actor }) => {
      authorize(actor, 'installation.manageUsers', INSTALLATION);
      return { users: (await findUsers()).map((user) => presentUser(actor, user)) };
    }),
    route('updateUser', async ({ actor, params, body }) => {
      authorize(actor, 'installation.manageUsers', INSTALLATION);
      const user = authorize(actor, 'user.update', await findUserWithTeams(params.userId));
      return presentUser(actor, await updateUser(context, actor, user, body));
    }),
    route(
      'createResetLink',
      async ({ actor, params }) => {
        authorize(actor, 'installation.manageUsers', INSTALLATION);
        const user = authorize(actor, 'user.issueResetLink', await User.findByPk(params.userId));
        const { link, expiresAt } = await issueResetLink(context, actor, user);
        return { link, expiresAt: expiresAt.toISOString() };
      },
      { status: 201 },
    ),
  ];
}
