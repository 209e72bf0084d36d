import { ForbiddenError, NotFoundError } from '../errors.js';
import type { Actor } from './actor.js';
import { policies } from './policies.js';
import type { Action, Resource, RowOf, VerbOf } from './policies.js';

/** Asks one rule. */
export function can<A extends Action>(actor: Actor, action: A, row: RowOf<A>): boolean {
  // The row type goes with the action by the signature above; the union of all rules cannot show it.
  const rule = policies[action] as (actor: Actor, row: RowOf<A>) => boolean;
  return Object.hasOwn(policies, action) && rule(actor, row);
}

/**
 * Lets the action on the row pass, or throws: 404 when the row is absent or may not be read, 403 when it may be read
 * but this may not be done to it. Called once for every loaded row.
 */
export function authorize<A extends Action, Row extends RowOf<A>>(actor: Actor, action: A, row: Row | null): Row {
  if (row === null) throw new NotFoundError();
  // A resource's read rule looks at no more of the row than its other rules do.
  const readAction = `${action.slice(0, action.indexOf('.'))}.read` as A;
  if (!can(actor, readAction, row)) throw new NotFoundError();
  if (!can(actor, action, row)) throw new ForbiddenError();
  return row;
}

/** What the actor may do to the row, for a response: the client hides the rest and holds no rules. */
export function abilitiesOn<R extends Resource, const V extends VerbOf<R>>(
  actor: Actor,
  resource: R,
  verbs: readonly V[],
  row: RowOf<Extract<Action, `${R}.${V}`>>,
): Record<V, boolean> {
  const entries = verbs.map((verb) => {
    const action = `${resource}.${verb}` as Extract<Action, `${R}.${V}`>;
    return [verb, can(actor, action, row)] as const;
  });
  return Object.fromEntries(entries) as Record<V, boolean>;
}
