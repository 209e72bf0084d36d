import { useId } from 'react';
import { VERDICTS, type Verdict } from '../../../../shared/types/states';
import { VERDICT_LOOKS, VerdictWord } from '../../../components/status-word';
import { classNames } from '../../../lib/class-names';

const CHOSEN: Readonly<Record<Verdict, string>> = {
  open: 'bg-fold text-ink',
  supported: 'bg-verdigris-wash text-verdigris',
  refuted: 'bg-madder-wash text-madder',
  confirmed: 'bg-verdigris text-cloth',
};

/** Open, supported, refuted or confirmed; arrow keys move, as in any group of radio buttons. */
export function VerdictChoice({ verdict, onChoose }: { verdict: Verdict; onChoose: ((verdict: Verdict) => void) | null }) {
  const name = useId();
  if (onChoose === null) return <VerdictWord verdict={verdict} />;
  return (
    <fieldset className="grid w-full grid-cols-2 overflow-hidden rounded-panel border border-selvage tablet:inline-flex tablet:w-auto">
      <legend className="sr-only">Verdict</legend>
      {VERDICTS.map((option) => {
        const { icon: Icon, word } = VERDICT_LOOKS[option];
        const isChosen = option === verdict;
        return (
          <label
            key={option}
            className={classNames(
              'inline-flex min-h-8 items-center gap-1.5 px-2.5 text-table font-semibold has-focus-visible:outline-2 has-focus-visible:-outline-offset-2 has-focus-visible:outline-indigo',
              isChosen ? CHOSEN[option] : 'text-faded hover:bg-fold',
            )}
          >
            <input type="radio" name={name} value={option} checked={isChosen} onChange={() => onChoose(option)} className="sr-only" />
            <Icon aria-hidden="true" className="size-4" />
            {word}
          </label>
        );
      })}
    </fieldset>
  );
}
