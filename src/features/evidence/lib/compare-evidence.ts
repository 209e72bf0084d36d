import { VALENCE_GROUP_NAMES } from '../../../../shared/chemistry/valence-group-names';
import type { CarbonWindow, EvidenceDocument } from '../../../../shared/schemas/evidence';
import { describeWindow } from './window-text';

/** One difference between two evidence documents, for people. */
export interface EvidenceChange {
  readonly part: string;
  /** Null: was not there before. */
  readonly before: string | null;
  /** Null: is no longer there. */
  readonly after: string | null;
}

const countText = (count: number | undefined, unit: string): string => (count === undefined ? '' : `, ${count}${unit}`);

const windowChange = (window: CarbonWindow | null | undefined): string =>
  window === undefined ? '' : window === null ? ', no window' : `, window ${describeWindow(window)}`;

/** Pairs equal texts off; what is left on either side was removed or added. */
function changesOfLists(part: string, before: readonly string[], after: readonly string[]): EvidenceChange[] {
  const left = [...before];
  const added: string[] = [];
  for (const entry of after) {
    const at = left.indexOf(entry);
    if (at === -1) added.push(entry);
    else left.splice(at, 1);
  }
  return [...left.map((entry) => ({ part, before: entry, after: null })), ...added.map((entry) => ({ part, before: null, after: entry }))];
}

function partsOf(document: EvidenceDocument): Record<string, string[]> {
  const { fragments, correlations } = document;
  return {
    'Required fragments': fragments.required.map(
      ({ smiles, count, label }) => `${count} × ${label === undefined || label === '' ? smiles : `${label} (${smiles})`}`,
    ),
    'Excluded fragments': fragments.excluded.map(({ smiles, label }) =>
      label === undefined || label === '' ? smiles : `${label} (${smiles})`,
    ),
    '¹³C signals': document.carbonSignals.map(
      ({ shift, hydrogens, count, window }) =>
        `δ ${shift.toFixed(1)}${hydrogens === undefined ? '' : `, ${['C', 'CH', 'CH₂', 'CH₃'][hydrogens]}`}${countText(count, ' C')}${windowChange(window)}`,
    ),
    '¹H signals': document.protonSignals.map(
      ({ shift, count, multiplicity, couplings }) =>
        `δ ${shift.toFixed(2)}${countText(count, ' H')}${multiplicity === undefined ? '' : `, ${multiplicity}`}${couplings === undefined || couplings.length === 0 ? '' : `, J = ${couplings.join(', ')} Hz`}`,
    ),
    'IR bands': document.infraredBands.map(
      ({ wavenumber, intensity }) => `${wavenumber} cm⁻¹${intensity === undefined ? '' : `, ${intensity}`}`,
    ),
    'Mass peaks': document.massPeaks.map(({ mz, intensity }) => `m/z ${mz}${intensity === undefined ? '' : `, ${intensity}`}`),
    '2D correlations': [
      ...correlations.cosy.map((pair) => `COSY ${pair.join(' – ')}`),
      ...correlations.hsqc.map((pair) => `HSQC ${pair.join(' – ')}`),
      ...correlations.hmbc.map((pair) => `HMBC ${pair.join(' – ')}`),
    ],
  };
}

function optionsOf({ options, correlations }: EvidenceDocument): Record<string, string> {
  return {
    Solvent: options.solvent === '' ? 'not given' : options.solvent,
    'Resonance forms': options.mergeResonanceForms ? 'merged' : 'counted apart',
    'Plausibility rules': options.plausibility
      ? options.disabledRules.length === 0
        ? 'all on'
        : `on, without ${options.disabledRules.join(', ')}`
      : 'off',
    'Ring sizes': `${options.ringSizes.min} to ${options.ringSizes.max ?? 'any'}`,
    '¹³C list': options.carbonList === 'complete' ? 'every CH, CH₂ and CH₃ shows' : 'signals may be missing',
    'Groups of higher valence':
      options.valenceGroups === undefined
        ? 'all in rankings'
        : options.valenceGroups.length === 0
          ? 'none'
          : options.valenceGroups.map((group) => VALENCE_GROUP_NAMES[group].name).join(', '),
    'Limits of 2D pairs': `COSY ${correlations.cosyBonds} bonds, HMBC ${correlations.hmbcBonds} bonds, ${correlations.exceptions} exceptions`,
    'Windows from shifts': options.shiftWindows === undefined ? 'in rankings' : options.shiftWindows ? 'on' : 'off',
    'Candidates kept': String(options.keep),
    'Time limit': options.maxSeconds === null ? 'none' : `${options.maxSeconds} s`,
    'Most constitutions': options.maxConstitutions === undefined ? 'no limit' : String(options.maxConstitutions),
  };
}

/** What changed from one document to another, in the order of the form. Order of signals has no meaning. */
export function compareEvidence(before: EvidenceDocument, after: EvidenceDocument): EvidenceChange[] {
  const changes: EvidenceChange[] = [];
  if (before.formula !== after.formula) changes.push({ part: 'Formula', before: before.formula, after: after.formula });
  const oldParts = partsOf(before);
  const newParts = partsOf(after);
  for (const [part, entries] of Object.entries(newParts)) changes.push(...changesOfLists(part, oldParts[part] ?? [], entries));
  const oldOptions = optionsOf(before);
  for (const [part, value] of Object.entries(optionsOf(after)))
    if (oldOptions[part] !== value) changes.push({ part, before: oldOptions[part] ?? null, after: value });
  return changes;
}
