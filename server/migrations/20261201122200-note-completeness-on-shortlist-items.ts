import { sqlMigration } from './migration.js';

/** Whether the run behind a shortlisted candidate saw everything; known only where the run is still there. */
export const noteCompletenessOnShortlistItems = sqlMigration(
  '20261201122200-note-completeness-on-shortlist-items',
  `UPDATE shortlist_items JOIN runs ON runs.id = shortlist_items.run_id
      SET shortlist_items.snapshot = JSON_SET(shortlist_items.snapshot, '$.runComplete', JSON_EXTRACT('[false,true]', IF(runs.complete, '$[1]', '$[0]')))`,
  `UPDATE shortlist_items SET snapshot = JSON_REMOVE(snapshot, '$.runComplete')`,
);
