import type { AppContext } from '../../app-context.js';
import { publicRoute, type Route } from '../route.js';

export function installationRoutes(context: AppContext): Route[] {
  return [publicRoute('readInstallation', () => Promise.resolve({ demoAccounts: [...(context.demoAccounts ?? [])] }))];
}
