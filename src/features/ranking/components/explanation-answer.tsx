import { CircleX, ListOrdered, Scissors, Sigma } from 'lucide-react';
import { useState } from 'react';
import { ButtonLink } from '../../../components/button';
import { paths } from '../../../app/paths';
import { Formula } from '../../../components/chemistry-text';
import { FUNNEL_STAGE_TEXT } from '../../../components/funnel/funnel-stages';
import { StatusWord } from '../../../components/status-word';
import { StructureDrawing } from '../../../components/structure/structure-drawing';
import { classNames } from '../../../lib/class-names';
import { formatProbability, formatSigned } from '../../../lib/numbers';
import type { Explanation } from '../api/explanation-query';

type Rejection = Extract<Explanation, { kind: 'rejected' }>;

function RejectionAnswer({ explanation }: { explanation: Rejection }) {
  const [active, setActive] = useState<number | null>(null);
  const { reasons, smiles, stage } = explanation;
  const shown = active === null ? reasons : reasons.slice(active, active + 1);
  return (
    <div className="space-y-3">
      <StatusWord tone="madder" icon={Scissors}>
        <strong className="font-semibold">Cut at: {FUNNEL_STAGE_TEXT[stage].name}</strong>
      </StatusWord>
      <StructureDrawing
        smiles={smiles}
        width={340}
        height={200}
        hasAtomNumbers
        alt="The structure, with the atoms concerned marked"
        halos={shown.map((reason) => ({ atoms: reason.atoms, tone: 'madder' }))}
      />
      <ul className="space-y-1">
        {reasons.map((reason, index) => (
          <li
            key={`${reason.reason}${index}`}
            onPointerEnter={() => setActive(index)}
            onPointerLeave={() => setActive(null)}
            className={classNames('rounded-small px-2 py-1', active === index ? 'bg-madder-wash' : 'bg-fold')}
          >
            {reason.text}
            {reason.atoms.length === 0 ? null : (
              <span className="block text-small text-faded">
                {reason.atoms.length === 1 ? 'Atom' : 'Atoms'} {reason.atoms.map((atom) => atom + 1).join(', ')}
              </span>
            )}
          </li>
        ))}
      </ul>
    </div>
  );
}

/** The answer to "Why is X not here?" in words, with the atoms concerned. */
export function ExplanationAnswer({ explanation }: { explanation: Explanation }) {
  switch (explanation.kind) {
    case 'rejected':
      return <RejectionAnswer explanation={explanation} />;
    case 'ranked':
      return (
        <div className="space-y-3">
          <StatusWord tone="verdigris" icon={ListOrdered}>
            <strong className="font-semibold">
              It is here: rank {explanation.rank}, {formatProbability(explanation.probability)}
            </strong>
          </StatusWord>
          <StructureDrawing smiles={explanation.smiles} width={340} height={180} />
          <ButtonLink to={paths.candidate(explanation.candidateId)}>Open rank {explanation.rank}</ButtonLink>
        </div>
      );
    case 'notKept':
      return (
        <div className="space-y-3">
          <StatusWord tone="weld" icon={Sigma}>
            <strong className="font-semibold">
              {explanation.runComplete
                ? 'It survives every filter but was not kept'
                : 'It survives every filter but is not in this incomplete run'}
            </strong>
          </StatusWord>
          <StructureDrawing smiles={explanation.smiles} width={340} height={180} />
          <p className="tabular">
            Its score is {formatSigned(explanation.score, 1)}
            {explanation.lowestKeptScore === null ? '' : `; the last candidate kept has ${formatSigned(explanation.lowestKeptScore, 1)}`}.
            {explanation.runComplete
              ? 'Its weight is part of the probabilities all the same.'
              : 'A limit stopped the run before it had seen every constitution: this one may not have been reached, and then it is not part of the probabilities.'}
          </p>
        </div>
      );
    case 'otherFormula':
      return (
        <div className="space-y-3">
          <StatusWord tone="madder" icon={CircleX}>
            <strong className="font-semibold">It has another formula</strong>
          </StatusWord>
          <p>
            The structure is <Formula formula={explanation.formula} className="font-semibold" />, this run weaves{' '}
            <Formula formula={explanation.expected} className="font-semibold" />.
          </p>
        </div>
      );
  }
}
