import { RemarkLine } from '../../../components/candidate/remarks';
import { CopyButton } from '../../../components/copy-button';
import { useElementWidth } from '../../../components/funnel/use-element-width';
import { Panel } from '../../../components/panel';
import { StructureDrawing, type AtomHalo } from '../../../components/structure/structure-drawing';
import type { CandidateDetail } from '../../../lib/queries/candidate-queries';
import { ScoreList } from './score-list';
import type { Highlight } from './use-highlight';

/** The structure with atom numbers, what is remarked about it, and its score. Stays in view beside the tables. */
export function StructurePanel({
  candidate,
  highlight,
  haloTone,
}: {
  candidate: CandidateDetail;
  highlight: Highlight;
  haloTone: AtomHalo['tone'];
}) {
  const [frame, width] = useElementWidth<HTMLDivElement>();
  return (
    // On a phone the score comes after the spectra, so the parts become items of the page's grid there.
    <div className="contents desk:sticky desk:top-4 desk:order-1 desk:block desk:max-h-[calc(100dvh-2rem)] desk:space-y-4 desk:overflow-y-auto">
      <Panel className="order-1">
        <div ref={frame} className="flex min-h-[260px] items-center justify-center">
          {width === 0 ? null : (
            <StructureDrawing
              smiles={candidate.smiles}
              width={width}
              height={260}
              alt={`Structure of rank ${candidate.rank} with atom numbers`}
              hasAtomNumbers
              halos={highlight.atoms.length === 0 ? [] : [{ atoms: highlight.atoms, tone: haloTone }]}
              onAtomHover={(atom) => highlight.pointAtAtoms(atom === null ? null : [atom])}
            />
          )}
        </div>
        <div className="mt-2 flex items-center justify-between gap-2 border-t border-seam pt-2">
          <code className="min-w-0 truncate font-mono text-small text-faded" title={candidate.smiles}>
            {candidate.smiles}
          </code>
          <CopyButton text={candidate.smiles} label="Copy SMILES" isIconOnly />
        </div>
      </Panel>
      {candidate.remarks.length === 0 ? null : (
        <Panel title="Remarks" className="order-1">
          <ul className="space-y-1 text-table">
            {candidate.remarks.map((remark) => (
              <li
                key={`${remark.kind}${remark.text}`}
                className="rounded-small px-1 hover:bg-fold"
                onPointerEnter={() => highlight.pointAtAtoms(remark.atoms)}
                onPointerLeave={() => highlight.pointAtAtoms(null)}
              >
                <RemarkLine remark={remark} />
              </li>
            ))}
          </ul>
        </Panel>
      )}
      <Panel title="Score" className="order-3">
        <ScoreList candidate={candidate} />
        <p className="mt-2 text-small text-faded">
          Natural logarithm of the likelihood of the evidence under this structure; higher is better.
        </p>
      </Panel>
    </div>
  );
}
