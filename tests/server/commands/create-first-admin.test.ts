import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { ensureFirstAdmin } from '../../../server/commands/create-first-admin.js';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { Session } from '../../../server/models/session.js';
import { User } from '../../../server/models/user.js';
import { createUser } from '../../support/factories.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

let server: TestApp;
beforeAll(async () => {
  server = await createTestApp();
});
beforeEach(async () => {
  await Session.destroy({ where: {} });
  await AuditEvent.destroy({ where: {} });
  await User.destroy({ where: {} });
});
afterAll(async () => {
  await server.close();
});

describe('the first admin', () => {
  it('gets a password that works and is stored nowhere in clear', async () => {
    const admin = await ensureFirstAdmin(server.context);
    expect(admin?.password).toMatch(/^[\w-]{24}$/);
    const response = await (await server.as()).post('/session', admin ?? {});
    expect(response.status).toBe(200);
    expect(response.body.user.isAdmin).toBe(true);
    expect(JSON.stringify([await User.findAll(), await AuditEvent.findAll()])).not.toContain(admin?.password);
    expect(await AuditEvent.findOne({ where: { action: 'user.create' } })).toMatchObject({ actorId: null, actorName: 'Installation' });
  });

  it('is made once', async () => {
    await ensureFirstAdmin(server.context);
    expect(await ensureFirstAdmin(server.context)).toBeNull();
    expect(await User.count()).toBe(1);
  });

  it('has the address of the configuration', async () => {
    const admin = await ensureFirstAdmin({ ...server.context, config: { ...server.context.config, adminEmail: 'head@laboratory.test' } });
    expect(admin?.email).toBe('head@laboratory.test');
  });

  it('is not made where there is an admin already, and is where there are only others', async () => {
    const admin = await createUser({ isAdmin: true });
    expect(await ensureFirstAdmin(server.context)).toBeNull();
    await admin.update({ isAdmin: false });
    expect(await ensureFirstAdmin(server.context)).not.toBeNull();
  });
});
