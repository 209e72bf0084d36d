import { CARBON_TOLERANCE, PAIR_NUCLEI, PROTON_TOLERANCE, type CorrelationKind } from '../../../../shared/chemistry/correlations';
import { parsePairTable } from '../../../../shared/chemistry/paste-pairs';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { Nucleus } from '../../../components/chemistry-text';
import { InlineError, TextInput } from '../../../components/field';
import { Panel } from '../../../components/panel';
import { EMPTY_PAIR, issueAt, signalsMeant, type EvidenceDraft, type PairRow } from '../lib/evidence-draft';
import { SignalTable, type CellMark, type SignalColumn } from './signal-table';
import { Total } from './total';

const PLACEHOLDERS: Record<CorrelationKind, readonly [string, string]> = {
  cosy: ['1.26', '4.12'],
  hsqc: ['60.8', '4.35'],
  hmbc: ['4.35', '166.9'],
};
const SAYS: Record<CorrelationKind, string> = {
  cosy: 'Protons that couple with one another.',
  hsqc: 'A carbon and the protons on it.',
  hmbc: 'A proton and a carbon further along.',
};

function columnsOf(kind: CorrelationKind): ReadonlyArray<SignalColumn<keyof PairRow>> {
  const [first, second] = PAIR_NUCLEI[kind];
  const nameOf = (nucleus: '1H' | '13C', ordinal: string): string =>
    kind === 'cosy' ? `${ordinal} proton shift` : nucleus === '13C' ? 'Carbon shift' : 'Proton shift';
  return [
    { key: 'first', name: nameOf(first, 'First'), label: <ShiftLabel nucleus={first} />, placeholder: PLACEHOLDERS[kind][0] },
    { key: 'second', name: nameOf(second, 'Second'), label: <ShiftLabel nucleus={second} />, placeholder: PLACEHOLDERS[kind][1] },
  ];
}

function ShiftLabel({ nucleus }: { nucleus: '1H' | '13C' }) {
  return (
    <>
      δ <Nucleus nucleus={nucleus} />
    </>
  );
}

const COLUMNS: Record<CorrelationKind, ReadonlyArray<SignalColumn<keyof PairRow>>> = {
  cosy: columnsOf('cosy'),
  hsqc: columnsOf('hsqc'),
  hmbc: columnsOf('hmbc'),
};

interface SectionProps {
  draft: EvidenceDraft;
  issues: readonly InputIssue[];
  isReadOnly: boolean;
  onChange: (change: Partial<EvidenceDraft>) => void;
}

/** Pairs of the 2D spectra, what they are taken to mean, and how strictly they hold. */
export function CorrelationsSection({ draft, issues, isReadOnly, onChange }: SectionProps) {
  const { pairs, pairLimits } = draft;
  const total = pairs.cosy.length + pairs.hsqc.length + pairs.hmbc.length;
  const setLimit = (change: Partial<EvidenceDraft['pairLimits']>) => onChange({ pairLimits: { ...pairLimits, ...change } });
  return (
    <Panel title="Correlations in 2D spectra" actions={<Total count={total} noun="pair" />}>
      <div className="grid gap-x-8 gap-y-6 wide:grid-cols-3">
        {(['hsqc', 'cosy', 'hmbc'] as const).map((kind) => (
          <PairTable key={kind} kind={kind} draft={draft} issues={issues} isReadOnly={isReadOnly} onChange={onChange} />
        ))}
      </div>
      {isReadOnly ? null : (
        <p className="mt-3 max-w-[80ch] text-small text-pretty text-faded">
          Below each shift stand the listed signals that it can mean: within {CARBON_TOLERANCE} ppm for carbon, {PROTON_TOLERANCE} ppm for
          protons. Where there are two, either may be right. A carbon signal without a count is taken for one kind of carbon: give the count
          where different carbons overlap. Paste two columns from a spreadsheet into any cell.
        </p>
      )}
      <fieldset disabled={isReadOnly} className="mt-5 grid gap-4 border-t border-seam pt-4 tablet:grid-cols-3">
        <TextInput
          label="COSY: bonds at most"
          inputMode="numeric"
          value={pairLimits.cosyBonds}
          hint="3: protons on neighbouring atoms."
          error={issueAt(issues, 'correlations.cosyBonds')}
          onChange={(event) => setLimit({ cosyBonds: event.target.value })}
        />
        <TextInput
          label="HMBC: bonds at most"
          inputMode="numeric"
          value={pairLimits.hmbcBonds}
          hint="Counted from the proton; usually 2 or 3."
          error={issueAt(issues, 'correlations.hmbcBonds')}
          onChange={(event) => setLimit({ hmbcBonds: event.target.value })}
        />
        <TextInput
          label="Exceptions"
          inputMode="numeric"
          value={pairLimits.exceptions}
          hint="So many COSY and HMBC pairs may span more bonds."
          error={issueAt(issues, 'correlations.exceptions')}
          onChange={(event) => setLimit({ exceptions: event.target.value })}
        />
      </fieldset>
    </Panel>
  );
}

function PairTable({ kind, draft, issues, isReadOnly, onChange }: SectionProps & { kind: CorrelationKind }) {
  const rows = draft.pairs[kind];
  const ends = ['first', 'second'] as const;
  const markFor = (row: number, column: keyof PairRow): CellMark | undefined => {
    const meant = signalsMeant(draft, PAIR_NUCLEI[kind][ends.indexOf(column)]!, rows[row]![column]);
    if (meant === null) return undefined;
    if (meant.length === 0) return { text: 'no such signal', isDoubtful: true };
    const other = kind === 'cosy' && column === 'second' ? signalsMeant(draft, '1H', rows[row]!.first) : null;
    // A signal has no cross peak with itself.
    if (meant.length === 1 && other?.length === 1 && other[0] === meant[0]) return { text: 'same signal', isDoubtful: true };
    return { text: `→ ${meant.join(' or ')}`, isDoubtful: false };
  };
  return (
    <div className="min-w-0">
      <h3 className="text-table font-semibold">{kind.toUpperCase()}</h3>
      <p className="mb-1 text-small text-faded">{SAYS[kind]}</p>
      <InlineError message={issues.find(({ path }) => path === `correlations.${kind}`)?.message} />
      <SignalTable
        caption={`${kind.toUpperCase()} pairs`}
        columns={COLUMNS[kind]}
        rows={rows}
        emptyRow={EMPTY_PAIR}
        isReadOnly={isReadOnly}
        markFor={markFor}
        issueFor={(row, column) =>
          issueAt(issues, `correlations.${kind}[${row}][${ends.indexOf(column)}]`) ??
          (column === 'first' ? issues.find(({ path }) => path === `correlations.${kind}[${row}]`)?.message : undefined)
        }
        onRowsChange={(next) => onChange({ pairs: { ...draft.pairs, [kind]: next } })}
        parsePaste={(text) => parsePairTable(text, kind)}
      />
    </div>
  );
}
