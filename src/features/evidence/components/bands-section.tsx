import { parseBandTable, parsePeakTable } from '../../../../shared/chemistry/paste-bands';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { InlineError } from '../../../components/field';
import { Panel } from '../../../components/panel';
import { EMPTY_BAND, EMPTY_PEAK, issueAt, type BandRow, type EvidenceDraft, type PeakRow } from '../lib/evidence-draft';
import { SignalTable, type SignalColumn } from './signal-table';
import { Total } from './total';

const BAND_COLUMNS: ReadonlyArray<SignalColumn<keyof BandRow>> = [
  { key: 'wavenumber', name: 'Wavenumber', label: 'ν̃ (cm⁻¹)', placeholder: '1718' },
  { key: 'intensity', name: 'Intensity', label: 'intensity', placeholder: 'strong', inputMode: 'text' },
];
const PEAK_COLUMNS: ReadonlyArray<SignalColumn<keyof PeakRow>> = [
  {
    key: 'mz',
    name: 'm/z',
    label: <i>m/z</i>,
    placeholder: '119.049',
  },
  { key: 'intensity', name: 'Intensity', label: 'intensity', placeholder: '100' },
];

interface SectionProps {
  draft: EvidenceDraft;
  issues: readonly InputIssue[];
  isReadOnly: boolean;
  onChange: (change: Partial<EvidenceDraft>) => void;
}

/** IR bands and mass peaks. */
export function BandsSection({ draft, issues, isReadOnly, onChange }: SectionProps) {
  const wholeList = (path: string) => issues.find((issue) => issue.path === path)?.message;
  return (
    <div className="grid gap-4 wide:grid-cols-2">
      <Panel title="Bands in IR" actions={<Total count={draft.bands.length} noun="band" />}>
        <InlineError message={wholeList('infraredBands')} />
        <SignalTable
          caption="IR bands"
          columns={BAND_COLUMNS}
          rows={draft.bands}
          emptyRow={EMPTY_BAND}
          isReadOnly={isReadOnly}
          issueFor={(row, column) => issueAt(issues, `infraredBands[${row}].${column}`)}
          onRowsChange={(bands) => onChange({ bands })}
          parsePaste={parseBandTable}
        />
        {isReadOnly ? null : (
          <p className="mt-2 text-small text-faded">Intensity: weak, medium, strong or broad; w, m, s, br are understood.</p>
        )}
      </Panel>
      <Panel title="Peaks in MS" actions={<Total count={draft.peaks.length} noun="peak" />}>
        <InlineError message={wholeList('massPeaks')} />
        <SignalTable
          caption="Mass peaks"
          columns={PEAK_COLUMNS}
          rows={draft.peaks}
          emptyRow={EMPTY_PEAK}
          isReadOnly={isReadOnly}
          issueFor={(row, column) => issueAt(issues, `massPeaks[${row}].${column}`)}
          onRowsChange={(peaks) => onChange({ peaks })}
          parsePaste={parsePeakTable}
        />
        {isReadOnly ? null : <p className="mt-2 text-small text-faded">Paste two columns from a spreadsheet into any cell.</p>}
      </Panel>
    </div>
  );
}
