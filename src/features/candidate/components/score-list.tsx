import { listScoreTerms } from '../../../components/candidate/score-terms';
import { formatSigned } from '../../../lib/numbers';
import type { CandidateDetail } from '../../../lib/queries/candidate-queries';

/** The score, term by term: natural logarithm of the likelihood, higher is better. */
export function ScoreList({ candidate }: { candidate: Pick<CandidateDetail, 'terms' | 'score'> }) {
  return (
    <table className="tabular w-full text-table">
      <caption className="sr-only">Score by term</caption>
      <tbody>
        {listScoreTerms(candidate.terms).map(({ term, name, value }) => (
          <tr key={term} className="border-t border-seam">
            <th scope="row" className="h-7 text-left font-normal text-faded">
              {name}
            </th>
            <td className="text-right">{formatSigned(value, 2)}</td>
          </tr>
        ))}
        <tr className="border-t border-selvage font-semibold">
          <th scope="row" className="h-7 text-left">
            Score
          </th>
          <td className="text-right">{formatSigned(candidate.score, 2)}</td>
        </tr>
      </tbody>
    </table>
  );
}
