import type { z } from 'zod';
import type { runListQuery } from '../../shared/schemas/runs.js';
import { EvidenceRevision } from '../models/evidence-revision.js';
import { Run } from '../models/run.js';
import { Unknown } from '../models/unknown.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

/** What a run is shown with. */
const around = [
  { model: Unknown, as: 'unknown', attributes: ['id', 'code', 'title'], required: true },
  { model: EvidenceRevision, as: 'revision', attributes: ['id', 'number', 'formula'], required: true },
  { model: User, as: 'startedBy', attributes: ['id', 'name'], required: true },
];

/** A run of one of the actor's teams. */
export async function findRun(actor: Actor, runId: string): Promise<Run | null> {
  return await Run.findOne({ where: { id: runId, teamId: teamIdsOf(actor) }, include: around });
}

/** Runs of an unknown, newest first. */
export async function listRunsOfUnknown(unknownId: string): Promise<Run[]> {
  return await Run.findAll({ where: { unknownId }, attributes: { exclude: ['evidence'] }, include: around, order: [['number', 'DESC']] });
}

/** One page of a team's runs, newest first. */
export async function listRunsOfTeam(
  teamId: string,
  { status, page, pageSize }: z.output<typeof runListQuery>,
): Promise<{ rows: Run[]; total: number }> {
  const { rows, count } = await Run.findAndCountAll({
    where: { teamId, ...(status === 'all' ? {} : { status }) },
    attributes: { exclude: ['evidence'] },
    include: around,
    order: [
      ['createdAt', 'DESC'],
      ['id', 'ASC'],
    ],
    offset: (page - 1) * pageSize,
    limit: pageSize,
  });
  return { rows, total: count };
}
