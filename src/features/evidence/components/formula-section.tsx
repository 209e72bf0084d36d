import {
  countOf,
  degreeOfUnsaturation,
  formatHill,
  monoisotopicMass,
  nitrogenRuleHint,
  parseFormula,
} from '../../../../shared/chemistry/formula';
import { Formula } from '../../../components/chemistry-text';
import { TextInput } from '../../../components/field';
import { Panel } from '../../../components/panel';

/** The molecular formula with what follows from it at once. */
export function FormulaSection({
  formula,
  error,
  isReadOnly,
  onChange,
}: {
  formula: string;
  error: string | undefined;
  isReadOnly: boolean;
  onChange: (formula: string) => void;
}) {
  const parsed = formula.trim() === '' ? null : parseFormula(formula);
  const counts = parsed?.ok === true ? parsed.counts : null;
  return (
    <Panel title="Molecular formula">
      <div className="grid items-start gap-x-8 gap-y-3 tablet:grid-cols-[minmax(200px,260px)_minmax(0,1fr)]">
        <TextInput
          label="Formula"
          value={formula}
          readOnly={isReadOnly}
          error={error}
          placeholder="C9H10O2"
          spellCheck={false}
          autoComplete="off"
          onChange={(event) => onChange(event.target.value)}
        />
        {counts === null ? (
          <p className="pt-7 text-table text-faded">From the mass spectrum. Unsaturation and mass appear here as you type.</p>
        ) : (
          <dl className="grid grid-cols-2 gap-x-6 gap-y-1 text-table tablet:grid-cols-[auto_auto_minmax(0,1fr)]">
            <Figure term="Hill order">
              <Formula formula={formatHill(counts)} className="text-lead" />
            </Figure>
            <Figure term="Rings plus double bonds">
              <span className="text-lead tabular">{String(degreeOfUnsaturation(counts)).replace('-', '−')}</span>
            </Figure>
            <Figure term="Monoisotopic mass">
              <span className="text-lead tabular">{monoisotopicMass(counts).toFixed(5)} u</span>
            </Figure>
            <p className="col-span-full text-faded">
              {nitrogenRuleHint(counts)}.
              {countOf(counts, 'O') > 0 && countOf(counts, 'S') + countOf(counts, 'P') > 0
                ? ' The double bonds of S=O and P=O are not among the rings plus double bonds.'
                : null}
            </p>
          </dl>
        )}
      </div>
    </Panel>
  );
}

function Figure({ term, children }: { term: string; children: React.ReactNode }) {
  return (
    <div>
      <dt className="text-small text-faded">{term}</dt>
      <dd>{children}</dd>
    </div>
  );
}
