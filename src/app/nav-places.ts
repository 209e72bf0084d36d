import { ChartNoAxesColumn, ClipboardList, FlaskConical, ListOrdered, Puzzle, ShieldCheck, Users, type LucideIcon } from 'lucide-react';
import type { Me, Membership } from '../lib/session';
import { paths } from './paths';

export interface NavPlace {
  to: string;
  label: string;
  icon: LucideIcon;
  /** First parts of the addresses that belong to this place. */
  roots: readonly string[];
}

/** Whether an address lies in a place. */
export const isAtPlace = (place: NavPlace, pathname: string): boolean =>
  place.roots.some((root) => pathname === root || pathname.startsWith(`${root}/`));

/** The places of the left rail. Who administers without belonging to a team finds the administration there. */
export function navPlaces(team: Membership | null, abilities: Me['abilities']): readonly NavPlace[] {
  if (team === null) {
    const places: NavPlace[] = [];
    if (abilities.manageUsers)
      places.push({ to: paths.adminPeople(), label: 'People', icon: ShieldCheck, roots: ['/admin/people', '/team'] });
    if (abilities.readAudit) places.push({ to: paths.adminAudit(), label: 'Audit', icon: ClipboardList, roots: ['/admin/audit'] });
    return places;
  }
  return [
    { to: paths.unknowns(team.teamId), label: 'Unknowns', icon: FlaskConical, roots: ['/teams', '/unknowns'] },
    { to: paths.runs(), label: 'Runs', icon: ListOrdered, roots: ['/runs', '/candidates'] },
    { to: paths.fragments(), label: 'Fragments', icon: Puzzle, roots: ['/fragments'] },
    { to: paths.predict(), label: 'Predict', icon: ChartNoAxesColumn, roots: ['/predict'] },
    { to: paths.team(), label: 'Team', icon: Users, roots: ['/team'] },
  ];
}
