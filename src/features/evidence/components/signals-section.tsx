import { useId } from 'react';
import { parseCarbonTable, parseProtonTable } from '../../../../shared/chemistry/paste-table';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { Nucleus } from '../../../components/chemistry-text';
import { InlineError } from '../../../components/field';
import { Panel } from '../../../components/panel';
import {
  derivedWindow,
  EMPTY_CARBON,
  EMPTY_PROTON,
  issueAt,
  type CarbonRow,
  type EvidenceDraft,
  type ProtonRow,
} from '../lib/evidence-draft';
import { DERIVED } from '../lib/window-text';
import { SignalTable, type SignalColumn } from './signal-table';
import { WindowCell } from './window-cell';
import { Total } from './total';

const CARBON_COLUMNS: ReadonlyArray<SignalColumn<keyof CarbonRow>> = [
  { key: 'shift', name: 'Shift', label: 'δ (ppm)', placeholder: '166.9' },
  { key: 'hydrogens', name: 'Attached hydrogens', label: 'attached H', placeholder: '0–3', inputMode: 'numeric' },
  { key: 'count', name: 'Carbons', label: 'carbons', placeholder: '?', inputMode: 'numeric' },
];
const PROTON_COLUMNS: ReadonlyArray<SignalColumn<keyof ProtonRow>> = [
  { key: 'shift', name: 'Shift', label: 'δ (ppm)', placeholder: '7.21' },
  { key: 'count', name: 'Protons', label: 'protons', placeholder: '2', inputMode: 'numeric' },
  { key: 'multiplicity', name: 'Multiplicity', label: 'pattern', placeholder: 'd', inputMode: 'text' },
  {
    key: 'couplings',
    name: 'Couplings',
    label: (
      <>
        <i>J</i> (Hz)
      </>
    ),
    placeholder: '8.1, 2.0',
    className: 'w-[32%]',
  },
];

interface SectionProps {
  draft: EvidenceDraft;
  issues: readonly InputIssue[];
  isReadOnly: boolean;
  onChange: (change: Partial<EvidenceDraft>) => void;
}

/** The two peak lists. Messages about a list as a whole stand below its title. */
export function SignalsSection({ draft, issues, isReadOnly, onChange }: SectionProps) {
  const hintId = useId();
  const wholeList = (path: string) => issues.find((issue) => issue.path === path)?.message;
  return (
    <div className="grid gap-4 wide:grid-cols-[minmax(0,5fr)_minmax(0,7fr)]">
      <Panel
        title={
          <>
            Signals in <Nucleus nucleus="13C" />
          </>
        }
        actions={<Total count={draft.carbons.length} noun="signal" />}
      >
        <InlineError message={wholeList('carbonSignals')} />
        <SignalTable
          caption="13C signals"
          columns={CARBON_COLUMNS}
          rows={draft.carbons}
          emptyRow={EMPTY_CARBON}
          isReadOnly={isReadOnly}
          issueFor={(row, column) =>
            issueAt(issues, `carbonSignals[${row}].${column}`) ??
            (column === 'shift' ? issues.find((issue) => issue.path === `carbonSignals[${row}]`)?.message : undefined)
          }
          onRowsChange={(carbons) => onChange({ carbons })}
          parsePaste={(text) => {
            const pasted = parseCarbonTable(text);
            return { cells: pasted.rows.map((row) => ({ ...row.cells, window: DERIVED })), notes: pasted.notes };
          }}
          extra={{
            label: 'window',
            className: 'w-[27%]',
            render: (row) => (
              <WindowCell
                row={`row ${row + 1}`}
                shift={draft.carbons[row]!.shift}
                text={draft.carbons[row]!.window}
                derived={derivedWindow(draft, row)}
                isReadOnly={isReadOnly}
                onChange={(window) => onChange({ carbons: draft.carbons.map((cells, at) => (at === row ? { ...cells, window } : cells)) })}
              />
            ),
          }}
        />
        {isReadOnly ? null : (
          <p id={hintId} className="mt-2 text-small text-faded">
            Attached hydrogens from DEPT or HSQC narrow the search most. The window says which hybridisations and how many bonded
            heteroatoms (X) the shift leaves open; press it to change it. Paste two or three columns from a spreadsheet into any cell.
          </p>
        )}
      </Panel>
      <Panel
        title={
          <>
            Signals in <Nucleus nucleus="1H" />
          </>
        }
        actions={<Total count={draft.protons.length} noun="signal" />}
      >
        <InlineError message={wholeList('protonSignals')} />
        <SignalTable
          caption="1H signals"
          columns={PROTON_COLUMNS}
          rows={draft.protons}
          emptyRow={EMPTY_PROTON}
          isReadOnly={isReadOnly}
          issueFor={(row, column) =>
            issueAt(issues, `protonSignals[${row}].${column}`) ??
            (column === 'shift' ? issues.find((issue) => issue.path === `protonSignals[${row}]`)?.message : undefined)
          }
          onRowsChange={(protons) => onChange({ protons })}
          parsePaste={(text) => {
            const pasted = parseProtonTable(text);
            return { cells: pasted.rows.map((row) => row.cells), notes: pasted.notes };
          }}
        />
      </Panel>
    </div>
  );
}
