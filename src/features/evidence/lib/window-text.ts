import { HYBRIDISATIONS, type CarbonWindow } from '../../../../shared/schemas/evidence';

/** What a cell of the form holds: '' = the window follows from the shift, 'none' = there is none, else `sp3,sp2;0-2`. */
export type WindowText = string;

export const DERIVED: WindowText = '';
export const NO_WINDOW: WindowText = 'none';

export function windowText(window: CarbonWindow | null | undefined): WindowText {
  if (window === undefined) return DERIVED;
  if (window === null) return NO_WINDOW;
  const { min, max } = window.heteroNeighbours;
  return `${HYBRIDISATIONS.filter((name) => window.hybridisations.includes(name)).join(',')};${min}-${max}`;
}

/** The inverse of `windowText`; text that it never wrote counts as derived. */
export function readWindowText(text: WindowText): CarbonWindow | null | undefined {
  if (text === NO_WINDOW) return null;
  const match = /^((?:sp3|sp2|sp)(?:,(?:sp3|sp2|sp))*);([0-4])-([0-4])$/.exec(text);
  if (match === null) return undefined;
  const names = (match[1] ?? '').split(',');
  return {
    hybridisations: HYBRIDISATIONS.filter((name) => names.includes(name)),
    heteroNeighbours: { min: Number(match[2]), max: Number(match[3]) },
  };
}

const NAMES = { sp3: 'sp³', sp2: 'sp²', sp: 'sp' } as const;
export const hybridisationName = (name: (typeof HYBRIDISATIONS)[number]): string => NAMES[name];

/** How many heteroatoms: `0`, `1–2`, `any`. */
export function heteroText({ heteroNeighbours: { min, max } }: CarbonWindow): string {
  if (min === 0 && max === 4) return 'any';
  return min === max ? String(min) : `${min}–${max}`;
}

/** A window for people: `sp² sp³, 1–2 heteroatoms`. */
export function describeWindow(window: CarbonWindow): string {
  const names =
    window.hybridisations.length === HYBRIDISATIONS.length
      ? 'any hybridisation'
      : window.hybridisations.map(hybridisationName).join(' or ');
  const hetero = heteroText(window);
  return `${names}, ${hetero} heteroatom${hetero === '1' ? '' : 's'}`;
}
