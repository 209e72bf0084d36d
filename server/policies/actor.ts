import type { TeamRole } from '../../shared/types/roles.js';

/** Who asks: the signed-in person with the roles of this moment. */
export interface Actor {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly isAdmin: boolean;
  readonly sessionId: string;
  readonly roleByTeam: ReadonlyMap<string, TeamRole>;
}

/** Teams within which rows may be loaded for the actor. */
export const teamIdsOf = (actor: Actor): string[] => [...actor.roleByTeam.keys()];
