import type { z } from 'zod';
import type { Funnel } from '../../shared/jobs/contract.js';
import type { funnelSchema } from '../../shared/schemas/runs.js';

export function presentFunnel(funnel: Funnel | null): z.input<typeof funnelSchema> | null {
  return funnel === null ? null : funnel.map((step) => ({ ...step, rejections: [...step.rejections] }));
}
