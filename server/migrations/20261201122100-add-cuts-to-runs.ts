import { sqlMigration } from './migration.js';

/** Branches that constraints cut while structures were being built; null for runs from before they were counted. */
export const addCutsToRuns = sqlMigration(
  '20261201122100-add-cuts-to-runs',
  'ALTER TABLE runs ADD COLUMN cuts JSON NULL AFTER funnel',
  'ALTER TABLE runs DROP COLUMN cuts',
);
