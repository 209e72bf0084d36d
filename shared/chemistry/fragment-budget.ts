import type { InputIssue } from '../schemas/problem.js';
import { elementOf, findElement } from './elements.js';
import { parseFragment, type Fragment } from './fragment.js';
import { countOf, degreeOfUnsaturation, formatHill, formulaCounts, type FormulaCounts } from './formula.js';

/** What required fragments leave of a formula, and what keeps them from fitting. */
export interface FragmentBudget {
  /** Atoms left, hydrogens included, in Hill order; negative where the fragments need more than there is. */
  readonly remaining: FormulaCounts;
  /** Hydrogens left. */
  readonly hydrogens: number;
  /** Rings and double bonds left for what is not inside a fragment; `=*` bonds still to be made are among them. */
  readonly unsaturations: number;
  readonly fits: boolean;
  readonly issues: readonly InputIssue[];
}

export interface RequiredCopies {
  readonly fragment: Fragment;
  readonly count: number;
  /** Place in the evidence list, for messages. */
  readonly index: number;
}

/** Sum of bond orders and hydrogens of a fragment atom, attachments included. */
function valenceOf(fragment: Fragment, atom: number): number {
  const { graph, attachments } = fragment;
  let valence = graph.hydrogens[atom]!;
  for (let other = 0; other < graph.atomCount; other++) valence += graph.bondOrders[atom * graph.atomCount + other]!;
  for (const attachment of attachments) if (attachment.atom === atom) valence += attachment.order;
  return valence;
}

/** Unsaturation that a fragment's higher valence states (S 4 and 6, P 5) add to the default count: ½ Σ (v − default). */
export function extraUnsaturationOf(copies: readonly RequiredCopies[]): number {
  let twice = 0;
  for (const { fragment, count } of copies) {
    for (let atom = 0; atom < fragment.graph.atomCount; atom++) {
      twice += count * (valenceOf(fragment, atom) - elementOf(fragment.graph.atomicNumbers[atom]!).defaultValence);
    }
  }
  return twice / 2;
}

/** Rings plus double bonds inside one copy. */
function unsaturationInside(fragment: Fragment): number {
  const { atomCount, bondOrders } = fragment.graph;
  let twice = 0;
  for (const order of bondOrders) twice += order;
  return twice / 2 - (atomCount - 1);
}

const attachmentSum = (fragment: Fragment): number => fragment.attachments.reduce((sum, { order }) => sum + order, 0);
const plural = (count: number, one: string, many = `${one}s`): string => `${count} ${count === 1 ? one : many}`;

/** Elements of which fragments need more than there is, as "C12 (the formula has 9)". */
function shortages(needed: FormulaCounts, formula: FormulaCounts): string[] {
  return [...needed].flatMap(([symbol, count]) =>
    count > countOf(formula, symbol) ? [`${symbol}${count} (the formula has ${countOf(formula, symbol)})`] : [],
  );
}

const scaled = (counts: ReadonlyMap<string, number>, factor: number): FormulaCounts =>
  formulaCounts([...counts].map(([symbol, count]) => [symbol, count * factor]));

/** Issues of fragments that need more atoms than the formula has; one issue at the list when only all together do. */
function checkAtoms(formula: FormulaCounts, copies: readonly RequiredCopies[], path: string): InputIssue[] {
  const issues: InputIssue[] = [];
  const total = new Map<string, number>();
  for (const { fragment, count, index } of copies) {
    const once = shortages(scaled(fragment.composition, 1), formula);
    const all = shortages(scaled(fragment.composition, count), formula);
    if (once.length > 0) {
      issues.push({
        path: `${path}[${index}].smiles`,
        message: `the fragment needs ${once.join(', ')}; choose a smaller fragment or correct the formula`,
      });
    } else if (all.length > 0) {
      issues.push({
        path: `${path}[${index}].count`,
        message: `${plural(count, 'copy', 'copies')} need ${all.join(', ')}; lower the count or correct the formula`,
      });
    }
    for (const [symbol, atoms] of fragment.composition) total.set(symbol, (total.get(symbol) ?? 0) + atoms * count);
  }
  const together = shortages(formulaCounts(total), formula);
  if (issues.length === 0 && together.length > 0) {
    issues.push({
      path,
      message: `the fragments together need ${together.join(', ')}; remove a fragment, lower a count or correct the formula`,
    });
  }
  return issues;
}

/** Least sum of (order − 1) over the bonds that close all attachments of one order; two of different copies may pair. */
function extraOrders(copies: readonly RequiredCopies[], order: 2 | 3): number {
  const open = copies.map(({ fragment, count }) => ({
    own: fragment.attachments.filter((attachment) => attachment.order === order).length,
    count,
  }));
  const all = open.reduce((sum, { own, count }) => sum + own * count, 0);
  return (order - 1) * Math.max(Math.ceil(all / 2), ...open.map(({ own }) => own));
}

/**
 * Reasons why the attachments cannot all be bonded, given that the atoms suffice. Units are the fragment copies and
 * the atoms left; a bond joins two different units, hydrogens go to the atoms left only.
 */
function checkBonds(remaining: FormulaCounts, copies: readonly RequiredCopies[], path: string): InputIssue[] {
  const hydrogens = countOf(remaining, 'H');
  const atoms = [...remaining].flatMap(([symbol, count]) =>
    symbol === 'H' ? [] : Array<number>(count).fill(findElement(symbol)!.defaultValence),
  );
  const atomValence = atoms.reduce((sum, valence) => sum + valence, 0);
  const unitCount = atoms.length + copies.reduce((sum, { count }) => sum + count, 0);
  const left = formatHill(remaining);

  const closed = copies.find(({ fragment }) => fragment.attachments.length === 0);
  if (closed !== undefined) {
    if (unitCount === 1 && hydrogens === 0) return [];
    return [
      {
        path: `${path}[${closed.index}].smiles`,
        message: `no attachment point, yet ${left === '' ? 'other fragments' : left} must be bonded to it; add * to each atom where the rest is bonded`,
      },
    ];
  }
  const openSum = copies.reduce((sum, { fragment, count }) => sum + count * attachmentSum(fragment), 0);
  if (hydrogens > atomValence) {
    const message =
      atoms.length === 0
        ? `${plural(hydrogens, 'hydrogen')} left and no atom to carry ${hydrogens === 1 ? 'it' : 'them'}; write hydrogens into a fragment or remove one`
        : `${plural(hydrogens, 'hydrogen')} left for atoms (${left}) that can carry only ${atomValence}; choose fragments with more hydrogens`;
    return [{ path, message }];
  }
  const bondSum = openSum + atomValence - hydrogens;
  if (bondSum % 2 !== 0) {
    const message =
      atoms.length === 0
        ? `${plural(openSum, 'attachment')} and no atoms left: an odd number cannot be paired; change the fragments or the formula`
        : `the attachments and the atoms left (${left}) have an odd number of open bonds; change a fragment's hydrogens or the formula`;
    return [{ path, message }];
  }
  if (unitCount === 1 && openSum > 0) {
    return [
      {
        path: `${path}[${copies[0]!.index}].smiles`,
        message: `${plural(openSum, 'attachment')} but nothing left to bond to; remove the *, or correct the formula`,
      },
    ];
  }
  // A multiple bond joins two pieces like a single one, but takes two or three of the open bonds on each side.
  const most = bondSum / 2 - extraOrders(copies, 2) - extraOrders(copies, 3);
  if (most < unitCount - 1) {
    const counts = `${plural(Math.max(most, 0), 'link')} can be made, joining ${unitCount} pieces takes ${unitCount - 1}`;
    return [
      {
        path,
        message: `fragments and atoms left do not hang together (${counts}); add attachment points, choose fragments with fewer rings and double bonds, or correct the formula`,
      },
    ];
  }
  const issues: InputIssue[] = [];
  for (const { fragment, index } of copies) {
    const own = attachmentSum(fragment);
    if (own > bondSum - own) {
      issues.push({
        path: `${path}[${index}].smiles`,
        message: `${plural(own, 'open bond')} of this fragment but only ${plural(bondSum - own, 'open bond')} elsewhere; remove attachment points or correct the formula`,
      });
    }
    for (const order of [2, 3] as const) {
      const open = fragment.attachments.filter((attachment) => attachment.order === order).length;
      if (open === 0) continue;
      const symbol = order === 2 ? '=*' : '#*';
      // A multiple bond goes to an atom left with valence enough, or to a like attachment of another copy.
      const capacity = atoms.reduce((sum, valence) => sum + Math.floor(valence / order), 0);
      const others = copies.reduce(
        (sum, copy) =>
          sum +
          (copy.count - (copy.index === index ? 1 : 0)) *
            copy.fragment.attachments.filter((attachment) => attachment.order === order).length,
        0,
      );
      if (open > capacity + others) {
        issues.push({
          path: `${path}[${index}].smiles`,
          message: `${symbol} needs an atom that can take a ${order === 2 ? 'double' : 'triple'} bond, and too few are left (${left === '' ? 'none' : left}); use a single bond * or correct the formula`,
        });
      }
    }
  }
  return issues;
}

/**
 * Balance of a formula and parsed required fragments (disjoint copies, DESIGN.md 4): what is left, and necessary
 * conditions for a structure to exist (atoms suffice, parity, connectedness, partners for every attachment). They are
 * not sufficient: the enumeration may still find nothing.
 *
 * @param path - path of the fragment list in messages.
 */
export function budgetOf(formula: FormulaCounts, copies: readonly RequiredCopies[], path = 'fragments.required'): FragmentBudget {
  const left = new Map<string, number>(formula);
  let unsaturations = degreeOfUnsaturation(formula) + extraUnsaturationOf(copies);
  for (const { fragment, count } of copies) {
    for (const [symbol, atoms] of fragment.composition) left.set(symbol, (left.get(symbol) ?? 0) - atoms * count);
    unsaturations -= count * unsaturationInside(fragment);
  }
  const remaining = formulaCounts(left);
  const shortage = checkAtoms(formula, copies, path);
  const issues = shortage.length > 0 || copies.length === 0 ? shortage : checkBonds(remaining, copies, path);
  return { remaining, hydrogens: countOf(remaining, 'H'), unsaturations, fits: issues.length === 0, issues };
}

/** `budgetOf` for fragments as typed; a SMILES that cannot be read is an issue and takes no atoms. */
export function fragmentBudget(
  formula: FormulaCounts,
  required: ReadonlyArray<{ readonly smiles: string; readonly count: number }>,
): FragmentBudget {
  const unreadable: InputIssue[] = [];
  const copies = required.flatMap(({ smiles, count }, index) => {
    const parsed = parseFragment(smiles);
    if (parsed.ok) return [{ fragment: parsed.fragment, count, index }];
    unreadable.push({ path: `fragments.required[${index}].smiles`, message: parsed.message });
    return [];
  });
  const budget = budgetOf(formula, copies);
  return { ...budget, fits: budget.fits && unreadable.length === 0, issues: [...unreadable, ...budget.issues] };
}
