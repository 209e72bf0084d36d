import { EvidenceRevision } from '../models/evidence-revision.js';
import { Unknown } from '../models/unknown.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

const author = { model: User, as: 'author', attributes: ['id', 'name'], required: true };

/** A revision of one of the actor's teams, with its author and unknown. */
export async function findRevision(actor: Actor, revisionId: string): Promise<EvidenceRevision | null> {
  return await EvidenceRevision.findOne({
    where: { id: revisionId, teamId: teamIdsOf(actor) },
    include: [author, { model: Unknown, as: 'unknown', required: true }],
  });
}

/** Revisions of an unknown, newest first, without their evidence. */
export async function listRevisions(unknownId: string): Promise<EvidenceRevision[]> {
  return await EvidenceRevision.findAll({
    where: { unknownId },
    attributes: { exclude: ['evidence', 'notes'] },
    include: [author],
    order: [['number', 'DESC']],
  });
}
