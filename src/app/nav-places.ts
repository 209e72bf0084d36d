import { FlaskConical, ListOrdered, Puzzle, ChartNoAxesColumn, Users, type LucideIcon } from 'lucide-react';
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

/** The places of the left rail, for a person with a team. */
export function navPlaces(teamId: string): readonly NavPlace[] {
  return [
    { to: paths.unknowns(teamId), label: 'Unknowns', icon: FlaskConical, roots: ['/teams', '/unknowns'] },
    { to: paths.runs(), label: 'Runs', icon: ListOrdered, roots: ['/runs', '/candidates'] },
    { to: paths.fragments(), label: 'Fragments', icon: Puzzle, roots: ['/fragments'] },
    { to: paths.predict(), label: 'Predict', icon: ChartNoAxesColumn, roots: ['/predict'] },
    { to: paths.team(), label: 'Team', icon: Users, roots: ['/team'] },
  ];
}
