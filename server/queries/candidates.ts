import { col, literal, Op, type Order } from 'sequelize';
import type { z } from 'zod';
import type { candidateListQuery } from '../../shared/schemas/runs.js';
import { Candidate } from '../models/candidate.js';
import { Run } from '../models/run.js';
import { ShortlistItem } from '../models/shortlist-item.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

export type CandidateListQuery = z.output<typeof candidateListQuery>;
/** What lists leave out: it makes most of a row. */
const DETAILS = ['spectra', 'matches'];

/** A candidate of one of the actor's teams, with its run. */
export async function findCandidate(actor: Actor, candidateId: string): Promise<Candidate | null> {
  return await Candidate.findOne({
    where: { id: candidateId, teamId: teamIdsOf(actor) },
    include: [{ model: Run, as: 'run', attributes: ['id', 'unknownId', 'number', 'complete'], required: true }],
  });
}

/** The run that a candidate was loaded with. */
export function runOf({ run }: Candidate): Run {
  if (run === undefined) throw new Error('The run was not loaded with the candidate.');
  return run;
}

/** One page of a run's candidates, sorted by the database. */
export async function listCandidates(runId: string, query: CandidateListQuery): Promise<{ rows: Candidate[]; total: number }> {
  const { rows, count } = await Candidate.findAndCountAll({
    where: { runId },
    attributes: { exclude: DETAILS },
    order: orderBy(query),
    offset: (query.page - 1) * query.pageSize,
    limit: query.pageSize,
  });
  return { rows, total: count };
}

/** The best candidates of a run, from `start` ranks below the first. */
export async function listByRank(runId: string, start: number, count: number): Promise<Candidate[]> {
  return await Candidate.findAll({
    where: { runId },
    attributes: { exclude: DETAILS },
    order: [['rank', 'ASC']],
    offset: start,
    limit: count,
  });
}

/** Equal values are ordered by rank; candidates without the value come last either way. */
function orderBy({ sort, direction }: CandidateListQuery): Order {
  const way = direction === 'ascending' ? 'ASC' : 'DESC';
  if (sort === 'rank') return [['rank', way]];
  const field = Candidate.getAttributes()[sort].field ?? sort;
  return [
    [literal(`\`${field}\` IS NULL`), 'ASC'],
    [col(field), way],
    ['rank', 'ASC'],
  ];
}

/** Ids of the candidates one rank above and one below. */
export async function findNeighbours({ runId, rank }: Candidate): Promise<{ previousId: string | null; nextId: string | null }> {
  const neighbours = await Candidate.findAll({ where: { runId, rank: { [Op.in]: [rank - 1, rank + 1] } }, attributes: ['id', 'rank'] });
  const idAt = (wanted: number) => neighbours.find((neighbour) => neighbour.rank === wanted)?.id ?? null;
  return { previousId: idAt(rank - 1), nextId: idAt(rank + 1) };
}

/** Shortlist items of an unknown by the hash of their constitution. */
export async function findShortlisted(unknownId: string, idcodeHashes: readonly string[]): Promise<Map<string, string>> {
  const items = await ShortlistItem.findAll({ where: { unknownId, idcodeHash: [...idcodeHashes] }, attributes: ['id', 'idcodeHash'] });
  return new Map(items.map(({ id, idcodeHash }) => [idcodeHash, id]));
}
