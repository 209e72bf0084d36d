import { createHash } from 'node:crypto';
import type { z } from 'zod';
import { parseFragment } from '../../shared/chemistry/fragment.js';
import type { teamFragmentCreateRequest } from '../../shared/schemas/unknowns.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ask } from '../compute/ask.js';
import { ConflictError, InvalidInputError } from '../errors.js';
import { TeamFragment } from '../models/team-fragment.js';
import type { Actor } from '../policies/actor.js';

/**
 * Adds a fragment to the library of a team.
 * @throws InvalidInputError when it cannot be read or has no attachment point
 * @throws ConflictError `alreadyInLibrary`, however else it is written there
 */
export async function addTeamFragment(
  context: AppContext,
  actor: Actor,
  teamId: string,
  input: z.output<typeof teamFragmentCreateRequest>,
): Promise<TeamFragment> {
  const parsed = parseFragment(input.smiles);
  if (!parsed.ok) throw new InvalidInputError([{ path: 'smiles', message: parsed.message }]);
  if (parsed.fragment.attachments.length === 0) {
    throw new InvalidInputError([{ path: 'smiles', message: 'expected at least one attachment point, written as *' }]);
  }
  const { structures } = await ask(context, 'layout', { smiles: [parsed.fragment.smiles] });
  const canonicalHash = createHash('sha256')
    .update(structures[0]?.idcode ?? '')
    .digest('hex');
  return await context.sequelize.transaction(async (transaction) => {
    const [fragment, isNew] = await TeamFragment.findOrCreate({
      where: { teamId, canonicalHash },
      defaults: { teamId, canonicalHash, name: input.name, group: input.group, smiles: parsed.fragment.smiles, createdById: actor.userId },
      transaction,
    });
    if (!isNew)
      throw new ConflictError(
        'alreadyInLibrary',
        `The library has this fragment already: “${fragment.name}” in the group “${fragment.group}”.`,
      );
    await recordAudit(transaction, actor, 'fragment.create', { kind: 'fragment', id: fragment.id, label: fragment.name, teamId });
    return fragment;
  });
}
