import type { AppContext } from '../app-context.js';
import { auditRoutes } from './audit/audit-routes.js';
import { candidateRoutes } from './candidates/candidate-routes.js';
import { commentRoutes } from './comments/comment-routes.js';
import { fragmentRoutes } from './fragments/fragment-routes.js';
import { installationRoutes } from './installation/installation-routes.js';
import { invitationRoutes } from './invitations/invitation-routes.js';
import { memberRoutes } from './members/member-routes.js';
import { passwordResetRoutes } from './password-resets/password-reset-routes.js';
import { predictionRoutes } from './predictions/prediction-routes.js';
import { revisionRoutes } from './revisions/revision-routes.js';
import type { Route } from './route.js';
import { runRoutes } from './runs/run-routes.js';
import { sessionRoutes } from './session/session-routes.js';
import { shortlistRoutes } from './shortlist/shortlist-routes.js';
import { teamRoutes } from './teams/team-routes.js';
import { unknownRoutes } from './unknowns/unknown-routes.js';
import { userRoutes } from './users/user-routes.js';

/** Every route of the API; a test holds the list against the endpoint table. */
export function apiRoutes(context: AppContext): Route[] {
  return [
    ...installationRoutes(context),
    ...sessionRoutes(context),
    ...invitationRoutes(context),
    ...passwordResetRoutes(context),
    ...teamRoutes(context),
    ...memberRoutes(context),
    ...userRoutes(context),
    ...auditRoutes(),
    ...unknownRoutes(context),
    ...revisionRoutes(context),
    ...commentRoutes(context),
    ...fragmentRoutes(context),
    ...runRoutes(context),
    ...candidateRoutes(),
    ...shortlistRoutes(context),
    ...predictionRoutes(context),
  ];
}
