/** Roles of a membership (DESIGN.md 1). `admin` is a property of the user: it spans the whole installation. */
export const TEAM_ROLES = ['chemist', 'lead', 'reader'] as const;
export type TeamRole = (typeof TEAM_ROLES)[number];
/** Role by which quotas are looked up. */
export type QuotaRole = TeamRole | 'admin';
