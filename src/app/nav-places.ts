import { FlaskConical, ListOrdered, Puzzle, ChartNoAxesColumn, Users, type LucideIcon } from 'lucide-react';
import { paths } from './paths';

export interface NavPlace {
  to: string;
  label: string;
  icon: LucideIcon;
}

/** The places of the left rail, for a person with a team. */
export function navPlaces(teamId: string): readonly NavPlace[] {
  return [
    { to: paths.unknowns(teamId), label: 'Unknowns', icon: FlaskConical },
    { to: paths.runs(), label: 'Runs', icon: ListOrdered },
    { to: paths.fragments(), label: 'Fragments', icon: Puzzle },
    { to: paths.predict(), label: 'Predict', icon: ChartNoAxesColumn },
    { to: paths.team(), label: 'Team', icon: Users },
  ];
}
