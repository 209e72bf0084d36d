import { authorize } from '../../policies/authorize.js';
import { presentCandidate, presentCandidateRow } from '../../presenters/candidate.js';
import { findCandidate, findNeighbours, findShortlisted, listCandidates, runOf } from '../../queries/candidates.js';
import { findRun } from '../../queries/runs.js';
import { route, type Route } from '../route.js';

export function candidateRoutes(): Route[] {
  return [
    route('listCandidates', async ({ actor, params, query }) => {
      const run = authorize(actor, 'run.read', await findRun(actor, params.runId));
      const { rows, total } = await listCandidates(run.id, query);
      const shortlisted = await findShortlisted(
        run.unknownId,
        rows.map(({ idcodeHash }) => idcodeHash),
      );
      return {
        rows: rows.map((candidate) => presentCandidateRow(candidate, shortlisted.get(candidate.idcodeHash) ?? null)),
        total,
        page: query.page,
        pageSize: query.pageSize,
        runComplete: run.complete,
      };
    }),
    route('readCandidate', async ({ actor, params }) => {
      const candidate = authorize(actor, 'candidate.read', await findCandidate(actor, params.candidateId));
      const { unknownId, complete } = runOf(candidate);
      const [neighbours, shortlisted] = await Promise.all([findNeighbours(candidate), findShortlisted(unknownId, [candidate.idcodeHash])]);
      return presentCandidate(actor, candidate, {
        unknownId,
        runComplete: complete,
        shortlistItemId: shortlisted.get(candidate.idcodeHash) ?? null,
        ...neighbours,
      });
    }),
  ];
}
