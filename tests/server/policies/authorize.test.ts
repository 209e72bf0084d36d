import { describe, expect, expectTypeOf, it } from 'vitest';
import type { TeamRole } from '../../../shared/types/roles.js';
import { ForbiddenError, NotFoundError } from '../../../server/errors.js';
import type { Actor } from '../../../server/policies/actor.js';
import { abilitiesOn, authorize, can } from '../../../server/policies/authorize.js';
import { type Action, policies, type VerbOf } from '../../../server/policies/policies.js';

const TEAM = 'team-a';
const actor = (roles: Readonly<Record<string, TeamRole>>, overrides: Partial<Actor> = {}): Actor => ({
  userId: 'self',
  name: 'Self',
  email: 'self@laboratory.test',
  isAdmin: false,
  sessionId: 'session',
  roleByTeam: new Map(Object.entries(roles)),
  ...overrides,
});
const unknown = { teamId: TEAM };
/** A row that answers every question of every rule with "another person's, of team A". */
const foreignRow = {
  id: TEAM,
  teamId: TEAM,
  userId: 'other',
  authorId: 'other',
  createdById: 'other',
  startedById: 'other',
  isLastLead: false,
};
/** The rules look only at the fields of `foreignRow`. */
const canOn = (who: Actor, action: Action): boolean => can(who, action, foreignRow as never);
const actions = Object.keys(policies) as Action[];

describe('the rules', () => {
  it('have a read rule for each resource', () => {
    for (const action of actions) expect(policies).toHaveProperty([`${action.split('.')[0]}.read`]);
  });

  it('never allow what the row may not be read for', () => {
    const callers = [
      actor({}),
      actor({ [TEAM]: 'reader' }),
      actor({ [TEAM]: 'chemist' }),
      actor({ [TEAM]: 'lead' }),
      actor({}, { isAdmin: true }),
      actor({ 'team-b': 'lead' }),
    ];
    for (const caller of callers) {
      for (const action of actions) {
        const read = `${action.split('.')[0]}.read` as Action;
        if (canOn(caller, action)) expect(canOn(caller, read), action).toBe(true);
      }
    }
  });

  it('let a stranger, and a lead of another team, do nothing with the rows of a team', () => {
    for (const stranger of [actor({}), actor({ 'team-b': 'lead' })]) {
      const allowed = actions.filter((action) => !action.startsWith('installation.') && canOn(stranger, action));
      expect(allowed).toEqual([]);
    }
  });

  it('let a reader only read, comment, explain, export and see the own quota', () => {
    const reader = actor({ [TEAM]: 'reader' });
    const allowed = actions.filter((action) => !action.startsWith('installation.') && !/\.read/.test(action) && canOn(reader, action));
    expect(allowed.sort()).toEqual(['run.explain', 'run.export', 'unknown.comment']);
  });

  it('let a chemist do everything a reader may, and a lead everything a chemist may', () => {
    const [reader, chemist, lead] = (['reader', 'chemist', 'lead'] as const).map((role) => actor({ [TEAM]: role }));
    for (const action of actions) {
      if (canOn(reader, action)) expect(canOn(chemist, action), action).toBe(true);
      if (canOn(chemist, action)) expect(canOn(lead, action), action).toBe(true);
    }
  });

  it('show an admin people and quotas of a team, but none of its science', () => {
    const admin = actor({}, { isAdmin: true });
    for (const action of actions) {
      const isScience =
        /^(unknown|revision|comment|fragment|run|candidate|shortlistItem)\./.test(action) ||
        /^team\.(readUnknowns|createUnknown|readFragments|createFragment|readRuns|readOwnQuota)$/.test(action);
      if (isScience) expect(canOn(admin, action), action).toBe(false);
    }
    expect(can(admin, 'member.remove', { teamId: TEAM, userId: 'other', isLastLead: true })).toBe(true);
  });

  it('keep the last lead of a team and the own account out of reach', () => {
    const lead = actor({ [TEAM]: 'lead' });
    expect(can(lead, 'member.changeRole', { teamId: TEAM, userId: 'self', isLastLead: true })).toBe(false);
    expect(can(lead, 'member.changeRole', { teamId: TEAM, userId: 'self', isLastLead: false })).toBe(true);
    expect(can(actor({}, { isAdmin: true }), 'user.update', { id: 'self' })).toBe(false);
  });

  it('keep comments to their authors, also from leads', () => {
    const row = { teamId: TEAM, authorId: 'other' };
    expect(can(actor({ [TEAM]: 'lead' }), 'comment.remove', row)).toBe(false);
    expect(can(actor({ [TEAM]: 'reader' }), 'comment.remove', { ...row, authorId: 'self' })).toBe(true);
    // Somebody who left the team.
    expect(can(actor({}), 'comment.remove', { ...row, authorId: 'self' })).toBe(false);
  });

  it('deny what is not written down, and do not compile when an action is misspelt', () => {
    const lead = actor({ [TEAM]: 'lead' });
    // @ts-expect-error there is no such action
    expect(can(lead, 'unknown.erase', unknown)).toBe(false);
    // @ts-expect-error there is no such action
    expect(() => authorize(lead, 'unknown.upadte', unknown)).toThrow(ForbiddenError);
    // @ts-expect-error there is no such resource
    expect(can(lead, 'toString', unknown)).toBe(false);
    // @ts-expect-error a comment has an author
    expect(can(lead, 'comment.remove', unknown)).toBe(false);
    expectTypeOf<VerbOf<'revision'>>().toEqualTypeOf<'read' | 'restore'>();
  });
});

describe('authorize', () => {
  it('returns the row when the action is allowed', () => {
    expect(authorize(actor({ [TEAM]: 'chemist' }), 'unknown.update', unknown)).toBe(unknown);
  });

  it('answers 404 for a row that is absent or may not be read, 403 for one that may only be read', () => {
    expect(() => authorize(actor({ [TEAM]: 'lead' }), 'unknown.update', null)).toThrow(NotFoundError);
    expect(() => authorize(actor({ 'team-b': 'lead' }), 'unknown.update', unknown)).toThrow(NotFoundError);
    expect(() => authorize(actor({ [TEAM]: 'reader' }), 'unknown.update', unknown)).toThrow(ForbiddenError);
  });
});

describe('abilities', () => {
  it('say for each asked action whether it is allowed', () => {
    expect(abilitiesOn(actor({ [TEAM]: 'reader' }), 'unknown', ['update', 'comment'], unknown)).toEqual({ update: false, comment: true });
    expect(abilitiesOn(actor({ [TEAM]: 'chemist' }), 'unknown', ['update', 'comment'], unknown)).toEqual({ update: true, comment: true });
    // @ts-expect-error there is no such action on an unknown
    expect(abilitiesOn(actor({ [TEAM]: 'lead' }), 'unknown', ['erase'], unknown)).toEqual({ erase: false });
  });
});
