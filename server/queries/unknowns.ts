import { col, fn, literal, Op, type Order, type WhereOptions, where } from 'sequelize';
import type { z } from 'zod';
import type { unknownListQuery } from '../../shared/schemas/unknowns.js';
import { UNKNOWN_STATUSES } from '../../shared/types/states.js';
import { EvidenceRevision } from '../models/evidence-revision.js';
import { Run } from '../models/run.js';
import { ShortlistItem } from '../models/shortlist-item.js';
import { Team } from '../models/team.js';
import { Unknown } from '../models/unknown.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

const author = { model: User, as: 'createdBy', attributes: ['id', 'name'], required: true };

/** An unknown of one of the actor's teams, with what its page shows. */
export async function findUnknown(actor: Actor, unknownId: string): Promise<Unknown | null> {
  return await Unknown.findOne({
    where: { id: unknownId, teamId: teamIdsOf(actor) },
    include: [author, { model: Team, as: 'team', attributes: ['id', 'isDemo'], required: true }],
  });
}

export interface UnknownCounts {
  readonly revisionCount: number;
  readonly shortlistCount: number;
}

export async function countAround(unknownId: string): Promise<UnknownCounts> {
  const [revisionCount, shortlistCount] = await Promise.all([
    EvidenceRevision.count({ where: { unknownId } }),
    ShortlistItem.count({ where: { unknownId } }),
  ]);
  return { revisionCount, shortlistCount };
}

export type UnknownListQuery = z.output<typeof unknownListQuery>;

/** One page of a team's unknowns, filtered and sorted by the database. */
export async function listUnknowns(teamId: string, query: UnknownListQuery): Promise<{ rows: Unknown[]; total: number }> {
  const { rows, count } = await Unknown.findAndCountAll({
    where: { [Op.and]: [{ teamId }, query.status === 'all' ? {} : { status: query.status }, matches(query.search)] },
    include: [author],
    order: orderBy(query),
    offset: (query.page - 1) * query.pageSize,
    limit: query.pageSize,
  });
  return { rows, total: count };
}

/** Each word must occur in code, title, description or formula, whatever its case; subscript digits count as digits. */
function matches(search: string): WhereOptions {
  const words = search
    .toLowerCase()
    .split(/\s+/)
    .filter((word) => word !== '');
  return {
    [Op.and]: words.map((word) => {
      const plain = word.replace(/[₀-₉]/g, (digit) => String(digit.charCodeAt(0) - 0x2080));
      const pattern = { [Op.like]: `%${plain.replace(/[\\%_]/g, '\\$&')}%` };
      return {
        [Op.or]: [{ code: pattern }, { title: pattern }, { description: pattern }, where(fn('LOWER', col('Unknown.formula')), pattern)],
      };
    }),
  };
}

/** Equal rows are ordered by their number, so that pages never overlap. */
function orderBy({ sort, direction }: UnknownListQuery): Order {
  const way = direction === 'ascending' ? 'ASC' : 'DESC';
  const statusRank = fn('FIELD', col('Unknown.status'), ...UNKNOWN_STATUSES);
  switch (sort) {
    case 'code':
      return [['number', way]];
    case 'status':
      return [
        [statusRank, way],
        ['number', 'DESC'],
      ];
    case 'formula':
      // Unknowns without evidence come last either way.
      return [
        [literal('`Unknown`.`formula` IS NULL'), 'ASC'],
        ['formula', way],
        ['number', 'DESC'],
      ];
    default:
      return [
        [sort, way],
        ['number', 'DESC'],
      ];
  }
}

/** The newest run of each unknown that has any. */
export async function findLastRuns(unknownIds: readonly string[]): Promise<Map<string, Run>> {
  const runs = await Run.findAll({
    where: {
      unknownId: [...unknownIds],
      number: { [Op.eq]: literal('(SELECT MAX(latest.number) FROM runs AS latest WHERE latest.unknown_id = `Run`.`unknown_id`)') },
    },
    attributes: ['id', 'unknownId', 'number', 'status', 'constitutionCount', 'survivorCount', 'funnel', 'finishedAt'],
  });
  return new Map(runs.map((run) => [run.unknownId, run]));
}
