import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { useElementWidth } from '../../../components/funnel/use-element-width';
import { PageHeader, Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { Notice } from '../../../components/status-word';
import { StructureDrawing } from '../../../components/structure/structure-drawing';
import { StructureEditor } from '../../../components/structure/structure-editor';
import { usePageTitle } from '../../../components/use-page-title';
import { issueFor } from '../../../lib/api-error';
import { predictionQuery } from '../api/prediction-query';
import { PredictedPanel } from '../components/predicted-panel';

const ASK_AFTER_MS = 400;

/** Draw or paste a structure, see its predicted spectra. The structure lives in the address. */
export function Component() {
  usePageTitle('Predict');
  const [search, setSearch] = useSearchParams();
  const asked = search.get('smiles') ?? '';
  const [smiles, setSmiles] = useState(asked);
  const [seenInAddress, setSeenInAddress] = useState(asked);
  // Back and forward bring another structure along.
  if (asked !== seenInAddress) {
    setSeenInAddress(asked);
    setSmiles(asked);
  }
  const trimmed = smiles.trim();
  useEffect(() => {
    if (trimmed === asked) return undefined;
    const timer = setTimeout(
      () => setSearch(trimmed === '' ? {} : { smiles: trimmed }, { replace: true, preventScrollReset: true }),
      ASK_AFTER_MS,
    );
    return () => clearTimeout(timer);
  }, [trimmed, asked, setSearch]);

  const { data, error, isFetching, refetch } = useQuery({ ...predictionQuery(asked), enabled: asked !== '' });
  const [litAtoms, setLitAtoms] = useState<readonly number[]>([]);
  const [frame, width] = useElementWidth<HTMLDivElement>();
  const fieldError = asked === trimmed && error !== null ? issueFor(error, 'smiles') : undefined;
  const prediction = asked === '' || error !== null ? undefined : data;
  return (
    <>
      <PageHeader title="Predict" lead="Shifts, multiplicities and couplings of a structure, by the rules that also rank candidates." />
      <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-4 desk:grid-cols-[minmax(0,420px)_minmax(0,1fr)]">
        <div className="min-w-0 space-y-4">
          <Panel>
            <StructureEditor label="Structure" value={smiles} onValueChange={setSmiles} error={fieldError} />
          </Panel>
          {prediction === undefined ? null : (
            <Panel title="Atom numbers" className={isFetching ? 'opacity-60' : ''}>
              <div ref={frame} className="flex min-h-[200px] justify-center">
                {width === 0 ? null : (
                  <StructureDrawing
                    smiles={prediction.smiles}
                    width={width}
                    height={200}
                    hasAtomNumbers
                    halos={litAtoms.length === 0 ? [] : [{ atoms: litAtoms, tone: 'indigo' }]}
                    onAtomHover={(atom) => setLitAtoms(atom === null ? [] : [atom])}
                  />
                )}
              </div>
            </Panel>
          )}
        </div>
        <div className="min-w-0 space-y-4" aria-live="polite" aria-busy={isFetching}>
          {asked === '' ? (
            <Panel isFlush>
              <EmptyState title="No structure yet">
                Draw a structure or paste its SMILES. Its predicted ¹³C and ¹H spectra will stand here, with the reason for every number.
              </EmptyState>
            </Panel>
          ) : error !== null && issueFor(error, 'smiles') !== undefined ? (
            <Panel isFlush>
              <EmptyState title="No prediction for this structure">It cannot be used as it is; see the field below the drawing.</EmptyState>
            </Panel>
          ) : error !== null ? (
            <Panel isFlush>
              <ErrorState title="No prediction for this structure" error={error} onRetry={() => void refetch()} />
            </Panel>
          ) : prediction === undefined ? (
            <Panel>
              <LoadingState label="Predicting" lines={10} className="p-0" />
            </Panel>
          ) : (
            <div className={isFetching ? 'space-y-4 opacity-60' : 'space-y-4'}>
              {prediction.notes.length === 0 ? null : (
                <Notice tone="weld">
                  {prediction.notes.map((note) => (
                    <p key={note}>{note}</p>
                  ))}
                </Notice>
              )}
              <PredictedPanel nucleus="13C" prediction={prediction} litAtoms={litAtoms} onPoint={setLitAtoms} />
              <PredictedPanel nucleus="1H" prediction={prediction} litAtoms={litAtoms} onPoint={setLitAtoms} />
            </div>
          )}
        </div>
      </div>
    </>
  );
}
