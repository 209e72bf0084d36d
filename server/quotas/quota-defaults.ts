import type { QuotaRole } from '../../shared/types/roles.js';

/** What a person may use in one team. */
export interface QuotaFigures {
  readonly cpuSecondsPerMonth: number;
  readonly candidatesPerRun: number;
  readonly runsAtOnce: number;
}

/** What holds unless a lead or an admin set something else for the member. */
export const QUOTA_DEFAULTS: Readonly<Record<QuotaRole, QuotaFigures>> = {
  reader: { cpuSecondsPerMonth: 0, candidatesPerRun: 1_000, runsAtOnce: 0 },
  chemist: { cpuSecondsPerMonth: 7_200, candidatesPerRun: 1_000, runsAtOnce: 2 },
  lead: { cpuSecondsPerMonth: 36_000, candidatesPerRun: 5_000, runsAtOnce: 4 },
  admin: { cpuSecondsPerMonth: 1_000_000_000, candidatesPerRun: 10_000, runsAtOnce: 100 },
};
