import type { AppContext } from '../app-context.js';
import type { Route } from './route.js';
import { sessionRoutes } from './session/session-routes.js';

/** Every route of the API. */
export function apiRoutes(context: AppContext): Route[] {
  return [...sessionRoutes(context)];
}
