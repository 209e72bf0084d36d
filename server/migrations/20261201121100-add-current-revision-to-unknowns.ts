import { sqlMigration } from './migration.js';

export const addCurrentRevisionToUnknowns = sqlMigration(
  '20261201121100-add-current-revision-to-unknowns',
  `ALTER TABLE unknowns ADD CONSTRAINT unknowns_current_revision_fk FOREIGN KEY (current_revision_id) REFERENCES evidence_revisions (id)`,
  `ALTER TABLE unknowns DROP FOREIGN KEY unknowns_current_revision_fk`,
);
