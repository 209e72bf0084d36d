import type { z } from 'zod';
import type { invitationRow } from '../../shared/schemas/people.js';
import type { Invitation } from '../models/invitation.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';

/** `invitedBy`: name of the person who made it. */
export function presentInvitation(actor: Actor, invitation: Invitation, invitedBy: string): z.input<typeof invitationRow> {
  return {
    id: invitation.id,
    email: invitation.email,
    role: invitation.role,
    invitedBy,
    expiresAt: invitation.expiresAt.toISOString(),
    abilities: abilitiesOn(actor, 'invitation', ['revoke'], invitation),
  };
}
