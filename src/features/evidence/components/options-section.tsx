import { VALENCE_GROUP_NAMES } from '../../../../shared/chemistry/valence-group-names';
import { PLAUSIBILITY_RULES } from '../../../../shared/plausibility/rules';
import { VALENCE_GROUPS, type ValenceGroup } from '../../../../shared/schemas/evidence';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { Checkbox, Select, TextInput } from '../../../components/field';
import { Panel } from '../../../components/panel';
import { issueAt, type EvidenceDraft } from '../lib/evidence-draft';

const SOLVENTS = ['CDCl3', 'DMSO-d6', 'acetone-d6', 'CD3OD', 'CD3CN', 'C6D6', 'D2O'];

/** Everything that steers the search beside the observations; folded away, because the defaults suit most unknowns. */
export function OptionsSection({
  draft,
  issues,
  isReadOnly,
  onChange,
}: {
  draft: EvidenceDraft;
  issues: readonly InputIssue[];
  isReadOnly: boolean;
  onChange: (options: EvidenceDraft['options']) => void;
}) {
  const { options } = draft;
  const set = (change: Partial<EvidenceDraft['options']>) => onChange({ ...options, ...change });
  const toggleRule = (id: string) =>
    set({
      disabledRules: options.disabledRules.includes(id)
        ? options.disabledRules.filter((rule) => rule !== id)
        : [...options.disabledRules, id],
    });
  const toggleGroup = (chosen: readonly ValenceGroup[], group: ValenceGroup) =>
    set({ valenceGroups: VALENCE_GROUPS.filter((entry) => (entry === group ? !chosen.includes(entry) : chosen.includes(entry))) });
  return (
    <Panel title="Options of the search">
      <fieldset disabled={isReadOnly} className="space-y-5">
        <div className="grid gap-4 tablet:grid-cols-2 wide:grid-cols-3">
          <TextInput
            label="Solvent"
            list="evidence-solvents"
            value={options.solvent}
            error={issueAt(issues, 'options.solvent')}
            onChange={(event) => set({ solvent: event.target.value })}
          />
          <datalist id="evidence-solvents">
            {SOLVENTS.map((solvent) => (
              <option key={solvent} value={solvent} />
            ))}
          </datalist>
          <Select
            label="The ¹³C list"
            value={options.carbonList}
            options={[
              { value: 'complete', label: 'shows every CH, CH₂ and CH₃' },
              { value: 'partial', label: 'may lack signals' },
            ]}
            hint="Complete: a kind of carbon without a signal is absent from the molecule."
            onValueChange={(carbonList) => set({ carbonList })}
          />
          <div className="grid grid-cols-2 gap-3">
            <TextInput
              label="Smallest ring"
              inputMode="numeric"
              value={options.smallestRing}
              error={issueAt(issues, 'options.ringSizes.min')}
              onChange={(event) => set({ smallestRing: event.target.value })}
            />
            <TextInput
              label="Largest ring"
              inputMode="numeric"
              placeholder="any"
              value={options.largestRing}
              error={issueAt(issues, 'options.ringSizes.max')}
              onChange={(event) => set({ largestRing: event.target.value })}
            />
          </div>
          <TextInput
            label="Candidates to keep"
            inputMode="numeric"
            value={options.keep}
            error={issueAt(issues, 'options.keep')}
            onChange={(event) => set({ keep: event.target.value })}
          />
          <TextInput
            label="Time limit (s)"
            inputMode="decimal"
            placeholder="none"
            value={options.maxSeconds}
            error={issueAt(issues, 'options.maxSeconds')}
            onChange={(event) => set({ maxSeconds: event.target.value })}
          />
          <TextInput
            label="Most constitutions"
            inputMode="numeric"
            placeholder="no limit"
            value={options.maxConstitutions}
            hint="Beyond it a run stops, incomplete."
            error={issueAt(issues, 'options.maxConstitutions')}
            onChange={(event) => set({ maxConstitutions: event.target.value })}
          />
        </div>
        <Checkbox
          label="Let ¹³C shifts narrow what their carbons can be"
          hint="Each signal without a window of its own gets one from its shift: hybridisation and bonded heteroatoms, with wide margins."
          checked={options.shiftWindows !== false}
          onChange={(event) => set({ shiftWindows: event.target.checked ? null : false })}
        />
        <Checkbox
          label="Count the resonance forms of an aromatic ring as one"
          checked={options.mergeResonanceForms}
          onChange={(event) => set({ mergeResonanceForms: event.target.checked })}
        />
        <ValenceGroupChoice
          chosen={options.valenceGroups ?? null}
          onChoose={(valenceGroups) => set({ valenceGroups })}
          onToggle={toggleGroup}
          error={issueAt(issues, 'options.valenceGroups')}
        />
        <div>
          <Checkbox
            label="Apply the plausibility rules"
            hint="Rules that reject and rules that cost probability; each can be switched off."
            checked={options.plausibility}
            onChange={(event) => set({ plausibility: event.target.checked })}
          />
          {options.plausibility ? (
            <details className="mt-2 ml-6">
              <summary className="text-table text-indigo">
                {PLAUSIBILITY_RULES.length} rules
                {options.disabledRules.length === 0 ? '' : `, ${options.disabledRules.length} switched off`}
              </summary>
              <div className="mt-3 grid gap-x-8 gap-y-4 wide:grid-cols-2">
                {(['hard', 'soft'] as const).map((kind) => (
                  <div key={kind}>
                    <h3 className="mb-1 text-table font-semibold">{kind === 'hard' ? 'Reject' : 'Cost probability'}</h3>
                    <ul className="space-y-1 text-table">
                      {PLAUSIBILITY_RULES.filter((rule) => rule.kind === kind).map((rule) => (
                        <li key={rule.id}>
                          <Checkbox
                            label={rule.title}
                            checked={!options.disabledRules.includes(rule.id)}
                            onChange={() => toggleRule(rule.id)}
                          />
                        </li>
                      ))}
                    </ul>
                  </div>
                ))}
              </div>
            </details>
          ) : null}
        </div>
      </fieldset>
    </Panel>
  );
}

/** Which groups the search may form without a fragment that brings them. */
function ValenceGroupChoice({
  chosen,
  onChoose,
  onToggle,
  error,
}: {
  chosen: EvidenceDraft['options']['valenceGroups'];
  onChoose: (groups: ValenceGroup[] | null) => void;
  onToggle: (chosen: readonly ValenceGroup[], group: ValenceGroup) => void;
  error: string | undefined;
}) {
  return (
    <div>
      <Select
        label="Groups of higher valence"
        className="max-w-80"
        value={chosen === null ? 'rankings' : 'chosen'}
        options={[
          { value: 'rankings', label: 'all in rankings' },
          { value: 'chosen', label: 'only the ticked ones' },
        ]}
        hint="Nitro, SO₂, P=O and their like, formed without a fragment. Evidence that rules a group out leaves it out."
        error={error}
        onValueChange={(value) => onChoose(value === 'rankings' ? null : [...VALENCE_GROUPS])}
      />
      {chosen === null ? null : (
        <ul className="mt-3 grid gap-x-8 gap-y-2 tablet:grid-cols-2">
          {VALENCE_GROUPS.map((group) => (
            <li key={group}>
              <Checkbox
                label={VALENCE_GROUP_NAMES[group].name}
                hint={VALENCE_GROUP_NAMES[group].covers}
                checked={chosen.includes(group)}
                onChange={() => onToggle(chosen, group)}
              />
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
