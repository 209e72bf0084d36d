import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { EvidenceDocument } from '../../../../shared/schemas/evidence';
import { paths } from '../../../app/paths';
import { Formula } from '../../../components/chemistry-text';
import { StructureDrawing } from '../../../components/structure/structure-drawing';
import { ErrorState, LoadingState } from '../../../components/states';
import { revisionQuery, type UnknownDetail } from '../../../lib/unknown-queries';
import { SignalStrip } from './signal-strip';

function FragmentRow({
  title,
  fragments,
}: {
  title: string;
  fragments: ReadonlyArray<{ smiles: string; count?: number; label?: string | undefined }>;
}) {
  if (fragments.length === 0) return null;
  return (
    <div>
      <h3 className="text-small font-normal text-faded">{title}</h3>
      <ul className="mt-1 flex flex-wrap gap-1.5">
        {fragments.map((fragment, index) => (
          <li key={index} className="flex items-center rounded-small border border-seam pr-1">
            <StructureDrawing
              smiles={fragment.smiles}
              width={76}
              height={52}
              alt={`${fragment.label ?? fragment.smiles}${(fragment.count ?? 1) > 1 ? `, ${fragment.count} times` : ''}`}
            />
            {(fragment.count ?? 1) > 1 ? <span className="text-small tabular">× {fragment.count}</span> : null}
          </li>
        ))}
      </ul>
    </div>
  );
}

const plural = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`;

/** Other evidence and limits worth a line. */
function furtherLines(evidence: EvidenceDocument): ReactNode[] {
  const { correlations, options } = evidence;
  const correlationCount = correlations.cosy.length + correlations.hsqc.length + correlations.hmbc.length;
  const lines: ReactNode[] = [];
  if (evidence.infraredBands.length > 0) lines.push(plural(evidence.infraredBands.length, 'IR band', 'IR bands'));
  if (evidence.massPeaks.length > 0) lines.push(plural(evidence.massPeaks.length, 'mass peak', 'mass peaks'));
  if (correlationCount > 0) lines.push(plural(correlationCount, '2D correlation', '2D correlations'));
  if (evidence.carbonSignals.length + evidence.protonSignals.length > 0 && options.solvent !== '')
    lines.push(
      <>
        in <Formula formula={options.solvent} />
      </>,
    );
  if (options.ringSizes.min > 3 || options.ringSizes.max !== null)
    lines.push(`rings ${options.ringSizes.min}–${options.ringSizes.max ?? 'any'}`);
  if (!options.plausibility) lines.push('plausibility rules off');
  return lines;
}

/** What the current revision says, short enough to stay in view beside the work. */
export function KnownEvidence({ unknown }: { unknown: UnknownDetail }) {
  if (unknown.currentRevisionId === null) {
    return (
      <p className="text-table text-faded">
        Nothing yet.{' '}
        {unknown.abilities.saveEvidence ? (
          <Link to={paths.unknownEvidence(unknown.id)} className="text-indigo">
            Enter the formula
          </Link>
        ) : null}
      </p>
    );
  }
  return <CurrentRevision revisionId={unknown.currentRevisionId} />;
}

function CurrentRevision({ revisionId }: { revisionId: string }) {
  const revision = useQuery(revisionQuery(revisionId));
  if (revision.isPending) return <LoadingState label="Loading the evidence" lines={4} className="p-0" />;
  if (revision.isError)
    return <ErrorState title="The evidence could not be loaded" error={revision.error} onRetry={() => void revision.refetch()} />;
  const { evidence, number } = revision.data;
  const lines = furtherLines(evidence);
  return (
    <div className="space-y-3">
      {evidence.carbonSignals.length > 0 ? (
        <SignalStrip nucleus="13C" shifts={evidence.carbonSignals.map((signal) => signal.shift)} />
      ) : null}
      {evidence.protonSignals.length > 0 ? (
        <SignalStrip nucleus="1H" shifts={evidence.protonSignals.map((signal) => signal.shift)} />
      ) : null}
      <FragmentRow title="Required fragments" fragments={evidence.fragments.required} />
      <FragmentRow title="Excluded fragments" fragments={evidence.fragments.excluded} />
      {lines.length === 0 ? null : (
        <ul className="flex flex-wrap gap-x-3 text-table text-faded">
          {lines.map((line, index) => (
            <li key={index}>{line}</li>
          ))}
        </ul>
      )}
      <p className="text-small text-faded">Revision {number}</p>
    </div>
  );
}
