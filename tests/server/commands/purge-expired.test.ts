import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { purgeExpired } from '../../../server/commands/purge-expired.js';
import { PasswordReset } from '../../../server/models/password-reset.js';
import { Session } from '../../../server/models/session.js';
import { SignInAttempt } from '../../../server/models/sign-in-attempt.js';
import { hashOf } from '../../../server/sessions/tokens.js';
import { createUser } from '../../support/factories.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

let server: TestApp;
beforeAll(async () => {
  server = await createTestApp();
});
afterAll(async () => {
  await server.close();
});

describe('tidying up', () => {
  it('removes what ended long ago and keeps the rest', async () => {
    const now = new Date();
    const daysAgo = (days: number) => new Date(now.getTime() - days * 86_400_000);
    const user = await createUser();
    const session = (overrides: { expiresAt: Date; endedAt?: Date }) =>
      Session.create({ userId: user.id, refreshTokenHash: hashOf('-'), userAgent: '', lastUsedAt: now, ...overrides });
    await session({ expiresAt: daysAgo(31) });
    await session({ expiresAt: daysAgo(-1), endedAt: daysAgo(31) });
    const kept = [
      await session({ expiresAt: daysAgo(29) }),
      await session({ expiresAt: daysAgo(-1) }),
      await session({ expiresAt: daysAgo(-1), endedAt: daysAgo(1) }),
    ];
    await PasswordReset.create({ userId: user.id, tokenHash: hashOf('old'), expiresAt: daysAgo(31) });
    await PasswordReset.create({ userId: user.id, tokenHash: hashOf('new'), expiresAt: daysAgo(1) });
    await SignInAttempt.create({ emailHash: hashOf('old'), failures: 3, lockedUntil: null, updatedAt: daysAgo(2) });
    await SignInAttempt.create({ emailHash: hashOf('new'), failures: 3, lockedUntil: null, updatedAt: now });

    await purgeExpired(server.context, now);
    expect((await Session.findAll()).map(({ id }) => id).sort()).toEqual(kept.map(({ id }) => id).sort());
    expect((await PasswordReset.findAll()).map(({ tokenHash }) => tokenHash)).toEqual([hashOf('new')]);
    expect((await SignInAttempt.findAll()).map(({ emailHash }) => emailHash)).toEqual([hashOf('new')]);
  });
});
