import type { AppContext } from '../../app-context.js';
import { predictSpectra } from '../../commands/predict-spectra.js';
import { authorize } from '../../policies/authorize.js';
import { INSTALLATION } from '../../policies/policies.js';
import { route, type Route } from '../route.js';

export function predictionRoutes(context: AppContext): Route[] {
  return [
    route('predict', async ({ actor, body }) => {
      authorize(actor, 'installation.predict', INSTALLATION);
      return await predictSpectra(context, body);
    }),
  ];
}
