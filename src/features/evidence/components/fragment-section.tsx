import { Check, Minus, Plus, TriangleAlert, X } from 'lucide-react';
import { useState } from 'react';
import { formatHill, parseFormula } from '../../../../shared/chemistry/formula';
import { fragmentBudget } from '../../../../shared/chemistry/fragment-budget';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { Button } from '../../../components/button';
import { Formula } from '../../../components/chemistry-text';
import { InlineError } from '../../../components/field';
import { IconButton } from '../../../components/icon-button';
import { Panel } from '../../../components/panel';
import { StatusWord } from '../../../components/status-word';
import { StructureDrawing } from '../../../components/structure/structure-drawing';
import { issueAt, type EvidenceDraft } from '../lib/evidence-draft';
import { FragmentPicker, type PickedFragment } from './fragment-picker';

interface SectionProps {
  draft: EvidenceDraft;
  issues: readonly InputIssue[];
  isReadOnly: boolean;
  teamId: string;
  onChange: (change: Partial<EvidenceDraft>) => void;
}

/** Pieces that must be in the molecule and pieces that must not, with what the formula still has to give. */
export function FragmentSection({ draft, issues, isReadOnly, teamId, onChange }: SectionProps) {
  const [picking, setPicking] = useState<'required' | 'excluded' | null>(null);
  const addRequired = (picked: PickedFragment) => {
    const known = draft.required.findIndex((row) => row.smiles === picked.smiles);
    const required = draft.required.map((row) => ({ ...row }));
    if (known === -1) required.push({ smiles: picked.smiles, count: '1', label: picked.name });
    else required[known]!.count = String((Number(required[known]!.count) || 0) + 1);
    onChange({ required });
  };
  const addExcluded = (picked: PickedFragment) => {
    if (draft.excluded.some((row) => row.smiles === picked.smiles)) return;
    onChange({ excluded: [...draft.excluded, { smiles: picked.smiles, label: picked.name }] });
  };
  const setCount = (index: number, count: number) =>
    onChange({ required: draft.required.map((row, at) => (at === index ? { ...row, count: String(count) } : row)) });

  return (
    <Panel title="Fragments" actions={<Budget draft={draft} />}>
      <div className="grid gap-x-8 gap-y-6 wide:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <div>
          <h3 className="text-table font-semibold">Required</h3>
          <p className="mb-2 text-small text-faded">Each is in the molecule as drawn, joined to the rest only where it is open.</p>
          <ul className="flex flex-wrap gap-2">
            {draft.required.map((row, index) => (
              <li key={index} className="w-[168px] rounded-panel border border-seam p-2">
                <CardHead
                  name={row.label || 'Drawn fragment'}
                  {...(isReadOnly ? {} : { onRemove: () => onChange({ required: draft.required.filter((_, at) => at !== index) }) })}
                />
                <StructureDrawing smiles={row.smiles} width={150} height={88} alt={row.smiles} isExpandable />
                <div className="mt-1 flex items-center justify-between gap-1">
                  <span className="text-small text-faded">copies</span>
                  <span className="flex items-center gap-1">
                    {isReadOnly ? null : (
                      <IconButton
                        label={`One copy fewer of ${row.label || row.smiles}`}
                        icon={<Minus className="size-3.5" />}
                        disabled={Number(row.count) <= 1}
                        onClick={() => setCount(index, Number(row.count) - 1)}
                      />
                    )}
                    <span className="min-w-5 text-center tabular">{row.count}</span>
                    {isReadOnly ? null : (
                      <IconButton
                        label={`One copy more of ${row.label || row.smiles}`}
                        icon={<Plus className="size-3.5" />}
                        disabled={Number(row.count) >= 20}
                        onClick={() => setCount(index, Number(row.count) + 1)}
                      />
                    )}
                  </span>
                </div>
                <InlineError message={issueAt(issues, `fragments.required[${index}]`)} />
              </li>
            ))}
          </ul>
          <InlineError message={issues.find((issue) => issue.path === 'fragments.required' || issue.path === 'fragments')?.message} />
          {isReadOnly ? null : (
            <Button
              size="small"
              className="mt-3"
              icon={<Plus aria-hidden="true" className="size-4" />}
              onClick={() => setPicking('required')}
            >
              Add required fragment
            </Button>
          )}
        </div>
        <div>
          <h3 className="text-table font-semibold">Excluded</h3>
          <p className="mb-2 text-small text-faded">Substructures that must not occur anywhere, whatever else is bonded to them.</p>
          <ul className="flex flex-wrap gap-2">
            {draft.excluded.map((row, index) => (
              <li key={index} className="w-[148px] rounded-panel border border-seam p-2">
                <CardHead
                  name={row.label || row.smiles}
                  {...(isReadOnly ? {} : { onRemove: () => onChange({ excluded: draft.excluded.filter((_, at) => at !== index) }) })}
                />
                <StructureDrawing smiles={row.smiles} width={130} height={72} alt={row.smiles} />
                <InlineError message={issueAt(issues, `fragments.excluded[${index}]`)} />
              </li>
            ))}
          </ul>
          {isReadOnly ? null : (
            <Button
              size="small"
              className="mt-3"
              icon={<Plus aria-hidden="true" className="size-4" />}
              onClick={() => setPicking('excluded')}
            >
              Add excluded fragment
            </Button>
          )}
        </div>
      </div>
      {picking === null ? null : (
        <FragmentPicker
          purpose={picking}
          teamId={teamId}
          budget={<Budget draft={draft} />}
          onPick={picking === 'required' ? addRequired : addExcluded}
          onClose={() => setPicking(null)}
        />
      )}
    </Panel>
  );
}

function CardHead({ name, onRemove }: { name: string; onRemove?: () => void }) {
  return (
    <div className="flex items-start justify-between gap-1">
      <span className="line-clamp-2 text-small">{name}</span>
      {onRemove === undefined ? null : (
        <IconButton label={`Remove ${name}`} tone="danger" icon={<X className="size-3.5" />} onClick={onRemove} />
      )}
    </div>
  );
}

/** What the formula has left beside the required fragments. */
function Budget({ draft }: { draft: EvidenceDraft }) {
  const parsed = parseFormula(draft.formula);
  if (!parsed.ok || draft.required.length === 0) return null;
  const budget = fragmentBudget(
    parsed.counts,
    draft.required.map(({ smiles, count }) => ({ smiles, count: Number(count) || 1 })),
  );
  const negative = [...budget.remaining].filter(([, count]) => count < 0);
  const rest = new Map([...budget.remaining].filter(([, count]) => count > 0));
  return (
    <span aria-live="polite" className="flex flex-wrap items-center gap-x-4 gap-y-1 text-table">
      {budget.fits ? (
        <StatusWord tone="verdigris" icon={Check}>
          fits
        </StatusWord>
      ) : (
        <StatusWord tone="madder" icon={TriangleAlert}>
          does not fit
        </StatusWord>
      )}
      <span>
        <span className="text-faded">left </span>
        {rest.size === 0 ? 'nothing' : <Formula formula={formatHill(rest)} />}
      </span>
      {negative.length > 0 ? (
        <span className="text-madder">short of {negative.map(([symbol, count]) => `${-count} ${symbol}`).join(', ')}</span>
      ) : null}
      <span>
        <span className="text-faded">hydrogens </span>
        <span className="tabular">{String(budget.hydrogens).replace('-', '−')}</span>
      </span>
      <span>
        <span className="text-faded">rings plus double bonds </span>
        <span className="tabular">{String(budget.unsaturations).replace('-', '−')}</span>
      </span>
    </span>
  );
}
