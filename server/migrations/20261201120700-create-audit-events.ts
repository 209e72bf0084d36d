import { exactText, ID, tableMigration } from './migration.js';

export const createAuditEvents = tableMigration(
  '20261201120700-create-audit-events',
  'audit_events',
  `
    id ${ID} NOT NULL,
    at DATETIME(3) NOT NULL,
    actor_id ${ID} NULL,
    actor_name VARCHAR(120) NOT NULL,
    action ${exactText(60)} NOT NULL,
    subject VARCHAR(300) NOT NULL,
    subject_id ${ID} NULL,
    team_id ${ID} NULL,
    detail JSON NOT NULL,
    CONSTRAINT audit_events_pk PRIMARY KEY (id),
    INDEX audit_events_at_idx (at),
    INDEX audit_events_team_idx (team_id, at),
    INDEX audit_events_subject_idx (subject_id, at),
    INDEX audit_events_actor_idx (actor_id),
    CONSTRAINT audit_events_actor_fk FOREIGN KEY (actor_id) REFERENCES users (id),
    CONSTRAINT audit_events_team_fk FOREIGN KEY (team_id) REFERENCES teams (id)
  `,
);
