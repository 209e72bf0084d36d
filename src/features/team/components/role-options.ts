import { TEAM_ROLES, type TeamRole } from '../../../../shared/types/roles';

const LABELS: Record<TeamRole, string> = { chemist: 'Chemist', lead: 'Lead', reader: 'Reader' };

export const ROLE_LINES: Record<TeamRole, string> = {
  chemist: 'Enters evidence, starts runs, keeps shortlists.',
  lead: 'What a chemist may, and manages members and quotas.',
  reader: 'Sees everything of the team, changes nothing but comments.',
};
export const ROLE_OPTIONS = TEAM_ROLES.map((role) => ({ value: role, label: LABELS[role] }));
export const roleLabel = (role: TeamRole): string => LABELS[role];
