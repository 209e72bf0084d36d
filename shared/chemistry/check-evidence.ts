import { evidenceDocument, type EvidenceDocument } from '../schemas/evidence.js';
import { formatIssuePath, type InputIssue } from '../schemas/problem.js';
import { readCorrelations } from './correlations.js';
import { parseExcludedPattern } from './excluded-pattern.js';
import { checkFormulaCounts, countOf, formatHill, parseFormula, type FormulaCounts } from './formula.js';
import { parseFragment, type Fragment } from './fragment.js';
import { budgetOf, extraUnsaturationOf, type RequiredCopies } from './fragment-budget.js';
import { doesPatternOccurIn } from './pattern-in-fragment.js';

export interface EvidenceCheck {
  /** Contradictions; empty when the document can be enumerated. */
  readonly issues: readonly InputIssue[];
  /** What was read differently from how it was written, for people. */
  readonly notes: readonly string[];
}
export type EvidenceResult =
  | { readonly ok: true; readonly document: EvidenceDocument; readonly notes: readonly string[] }
  | { readonly ok: false; readonly issues: readonly InputIssue[] };

/** Smallest ring through each ring bond of a fragment (breadth-first search around the bond). */
function ringSizesOf({ graph }: Fragment): { size: number; atoms: readonly number[] }[] {
  const { atomCount: n, bondOrders } = graph;
  const rings: { size: number; atoms: readonly number[] }[] = [];
  for (let from = 0; from < n; from++) {
    for (let to = from + 1; to < n; to++) {
      if (bondOrders[from * n + to] === 0) continue;
      const previous = new Int32Array(n).fill(-1);
      previous[from] = from;
      const queue = [from];
      for (let head = 0; head < queue.length && previous[to] === -1; head++) {
        const at = queue[head]!;
        for (let next = 0; next < n; next++) {
          if (bondOrders[at * n + next] === 0 || previous[next] !== -1 || (at === from && next === to)) continue;
          previous[next] = at;
          queue.push(next);
        }
      }
      if (previous[to] === -1) continue;
      const atoms = [to];
      for (let at = to; at !== from; at = previous[at]!) atoms.push(previous[at]!);
      rings.push({ size: atoms.length, atoms });
    }
  }
  return rings;
}

function checkRingSizes(copies: readonly RequiredCopies[], { min, max }: EvidenceDocument['options']['ringSizes']): InputIssue[] {
  const issues: InputIssue[] = [];
  for (const { fragment, index } of copies) {
    const rings = ringSizesOf(fragment);
    const small = rings.find(({ size }) => size < min);
    if (small !== undefined) {
      issues.push({
        path: 'options.ringSizes.min',
        message: `required fragment ${index + 1} has a ring of ${small.size}; expected at most ${small.size}, or another fragment`,
      });
    }
    // A ring with two or more attachments may still be bridged into smaller rings.
    const large = rings.find(
      ({ size, atoms }) => max !== null && size > max && fragment.attachments.filter(({ atom }) => atoms.includes(atom)).length < 2,
    );
    if (large !== undefined) {
      issues.push({
        path: 'options.ringSizes.max',
        message: `required fragment ${index + 1} has a ring of ${large.size}; expected at least ${large.size}, or another fragment`,
      });
    }
  }
  return issues;
}

const total = <T>(rows: readonly T[], value: (row: T) => number): number => rows.reduce((sum, row) => sum + value(row), 0);

/** Carbons and hydrogens of the signals against those of the formula. A signal without a count stands for one atom. */
function checkSignals(document: EvidenceDocument, formula: FormulaCounts): InputIssue[] {
  const issues: InputIssue[] = [];
  const carbons = countOf(formula, 'C');
  const hydrogens = countOf(formula, 'H');
  const signalCarbons = total(document.carbonSignals, ({ count }) => count ?? 1);
  const carbonBound = total(document.carbonSignals, (signal) => (signal.hydrogens ?? 0) * (signal.count ?? 1));
  const signalHydrogens = total(document.protonSignals, ({ count }) => count ?? 1);
  const exchangeable = total(document.protonSignals, (signal) => (signal.exchangeable === true ? (signal.count ?? 1) : 0));
  if (signalCarbons > carbons) {
    issues.push({
      path: 'carbonSignals',
      message: `signals for ${signalCarbons} carbons, the formula has ${carbons}; remove solvent and impurity signals, lower the counts or correct the formula`,
    });
  }
  if (carbonBound > hydrogens) {
    issues.push({
      path: 'carbonSignals',
      message: `attached hydrogens add up to ${carbonBound}, the formula has ${hydrogens}; lower the hydrogens or counts of the signals or correct the formula`,
    });
  }
  if (signalHydrogens > hydrogens) {
    issues.push({
      path: 'protonSignals',
      message: `signals for ${signalHydrogens} hydrogens, the formula has ${hydrogens}; remove solvent and impurity signals, lower the counts or correct the formula`,
    });
  } else if (carbonBound <= hydrogens && carbonBound + exchangeable > hydrogens) {
    issues.push({
      path: 'protonSignals',
      message: `${exchangeable} exchangeable hydrogens and ${carbonBound} on carbon (13C list) exceed the ${hydrogens} of the formula; correct the attached hydrogens, the counts or the exchangeable marks`,
    });
  }
  return issues;
}

/**
 * Checks whether the pieces of an evidence document agree with one another: formula, fragments, excluded patterns,
 * ring limits, signals. Reports every issue, each with the path of its field and a cure.
 *
 * @param document - parsed by the schema: shapes and single values are right.
 */
export function checkEvidence(document: EvidenceDocument): EvidenceCheck {
  const issues: InputIssue[] = [];
  const notes: string[] = [];
  const copies: RequiredCopies[] = [];
  document.fragments.required.forEach(({ smiles, count }, index) => {
    const parsed = parseFragment(smiles);
    if (!parsed.ok) issues.push({ path: `fragments.required[${index}].smiles`, message: parsed.message });
    else {
      copies.push({ fragment: parsed.fragment, count, index });
      for (const note of parsed.notes) notes.push(`Required fragment ${index + 1}: ${note}`);
    }
  });
  const areAllReadable = copies.length === document.fragments.required.length;

  document.fragments.excluded.forEach(({ smiles }, index) => {
    const path = `fragments.excluded[${index}].smiles`;
    const pattern = parseExcludedPattern(smiles);
    if (pattern.kind === 'fault') issues.push({ path, message: pattern.message });
    if (pattern.kind !== 'query') return;
    for (const note of pattern.notes) notes.push(`Excluded fragment ${index + 1}: ${note}`);
    const contradicted = copies.find(({ fragment }) => doesPatternOccurIn(pattern.query, fragment));
    if (contradicted !== undefined) {
      issues.push({ path, message: `excluded, but part of required fragment ${contradicted.index + 1}; remove one of the two` });
    }
  });
  issues.push(...checkRingSizes(copies, document.options.ringSizes));

  const parsed = parseFormula(document.formula);
  if (!parsed.ok) return { issues: [{ path: 'formula', message: parsed.message }, ...issues], notes };
  const formulaIssues = checkFormulaCounts(parsed.counts, extraUnsaturationOf(copies));
  if (formulaIssues.length === 0 && areAllReadable) issues.push(...budgetOf(parsed.counts, copies).issues);
  issues.push(...checkSignals(document, parsed.counts));
  const correlations = readCorrelations(document);
  issues.push(...correlations.issues);
  notes.push(...correlations.notes);
  return { issues: [...formulaIssues, ...issues], notes };
}

/**
 * Reads an evidence document from JSON: shape and agreement in one, defaults filled, formula in Hill order. What API,
 * command line and client use.
 */
export function parseEvidence(json: unknown): EvidenceResult {
  if (typeof json !== 'object' || json === null || Array.isArray(json)) {
    return { ok: false, issues: [{ path: '', message: 'expected an evidence document, an object such as {"formula": "C9H10O2"}' }] };
  }
  const shaped = evidenceDocument.safeParse(json);
  if (!shaped.success) {
    return {
      ok: false,
      issues: shaped.error.issues.flatMap((issue) =>
        issue.code === 'unrecognized_keys'
          ? issue.keys.map((key) => ({ path: formatIssuePath([...issue.path, key]), message: 'unknown field; remove it' }))
          : [{ path: formatIssuePath(issue.path), message: issue.message }],
      ),
    };
  }
  const { issues, notes } = checkEvidence(shaped.data);
  if (issues.length > 0) return { ok: false, issues };
  const formula = parseFormula(shaped.data.formula);
  return { ok: true, document: formula.ok ? { ...shaped.data, formula: formatHill(formula.counts) } : shaped.data, notes };
}
