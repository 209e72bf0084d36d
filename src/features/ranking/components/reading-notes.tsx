import { RegulatedNotice } from '../../../components/candidate/regulated-notice';

/** Cautions that belong to every ranking; louder when the unknown has a regulated purpose. */
export function ReadingNotes({ isComplete, isRegulated }: { isComplete: boolean; isRegulated: boolean }) {
  return (
    <div className="space-y-3">
      {isRegulated ? <RegulatedNotice /> : null}
      <details className="text-table">
        <summary className="w-fit rounded-small text-indigo">How to read this ranking</summary>
        <ul className="mt-2 max-w-[78ch] list-disc space-y-1 pl-5 text-faded">
          <li>
            Probabilities compare the constitutions that survived this run{isComplete ? '' : ', which did not see all of them'}. A wrong
            formula, a wrong required fragment or a filter that is too strict leaves the right one out: “none of these” is an estimate of
            that.
          </li>
          <li>
            New or corrected signals, another set of plausibility rules or another keep limit can change the order. The funnel says what
            each filter cut.
          </li>
          <li>Constitution settles neither stereochemistry nor salt form nor purity.</li>
          <li>
            Confirm against an authentic standard (same instrument and solvent, mixed-sample NMR or co-injection) or by independent
            synthesis; use X-ray diffraction where much depends on it.
          </li>
          <li>Treat the sample as hazardous: follow local rules and assume the worst.</li>
        </ul>
      </details>
    </div>
  );
}
