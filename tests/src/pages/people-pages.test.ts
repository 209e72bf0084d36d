import { expect, it } from 'vitest';
import { FakeProblem } from '../support/fake-api';
import { ids, laboratory, meAs, member } from '../support/fixtures';
import { describePages } from '../support/pages';

const admin = meAs('lead', { abilities: { createTeam: true, manageUsers: true, readAudit: true } });

describePages('the team page', (open) => {
  it('invites and hands the link over', async () => {
    const api = laboratory('lead', {
      invite: ({ body }) => ({
        invitation: {
          id: ids.run,
          ...(body as { email: string; role: 'reader' }),
          invitedBy: 'Mirela Dragan',
          expiresAt: '2026-12-08T10:00:00.000Z',
          abilities: { revoke: true },
        },
        link: 'https://isoloom.example/invitation/abc',
      }),
    });
    const page = await open(api, '/team');
    await page.getByRole('button', { name: 'Invite a member' }).click();
    await page.getByLabel('E-mail').fill('noor');
    await page.getByRole('button', { name: 'Invite', exact: true }).click();
    await page.getByText('expected an e-mail address').waitFor();
    await page.getByLabel('E-mail').fill('noor@lindenhof.example');
    await page.getByLabel('Role', { exact: true }).selectOption('reader');
    await page.getByRole('button', { name: 'Invite', exact: true }).click();
    await page.getByText('https://isoloom.example/invitation/abc').waitFor();
    await page.getByRole('button', { name: 'Copy link' }).click();
    await page.getByRole('button', { name: 'Copied' }).waitFor();
    expect(await page.evaluate(() => navigator.clipboard.readText())).toBe('https://isoloom.example/invitation/abc');
    expect(api.callsOf('invite')[0].body).toEqual({ email: 'noor@lindenhof.example', role: 'reader' });
  });

  it('changes a role, and says why when the server refuses', async () => {
    const api = laboratory('lead', {
      changeRole: () => new FakeProblem(409, { code: 'lastLead', message: 'A team keeps at least one lead.' }),
    });
    const page = await open(api, '/team');
    await page.getByLabel('Role of Jonas Petrauskas').selectOption('reader');
    await page.getByText('A team keeps at least one lead.').waitFor();
    await expect.poll(() => page.getByLabel('Role of Jonas Petrauskas').inputValue()).toBe('chemist');
    expect(api.callsOf('changeRole')[0]).toMatchObject({ params: { userId: ids.colleague }, body: { role: 'reader' } });
  });

  it('asks before a member is removed', async () => {
    const api = laboratory('lead', { removeMember: () => undefined });
    const page = await open(api, '/team');
    await page.getByRole('button', { name: 'Remove Jonas Petrauskas' }).click();
    await page.keyboard.press('Escape');
    expect(api.callsOf('removeMember')).toHaveLength(0);
    await page.getByRole('button', { name: 'Remove Jonas Petrauskas' }).click();
    await page.getByRole('button', { name: 'Remove member' }).click();
    await page.getByRole('dialog').waitFor({ state: 'detached' });
    expect(api.callsOf('removeMember')[0].params).toMatchObject({ userId: ids.colleague });
  });

  it('refuses text and fractions as quota, and leaves an empty figure to the role', async () => {
    const api = laboratory('lead', { setQuota: () => ({ cpuSecondsPerMonth: 100, candidatesPerRun: 5, runsAtOnce: 1 }) });
    const page = await open(api, '/team');
    await page.getByRole('button', { name: 'Set the quota of Jonas Petrauskas' }).click();
    await page.getByLabel('CPU time a month').fill('plenty');
    await page.getByText('expected a number').waitFor();
    await page.getByLabel('Runs at once').fill('1.5');
    await page.getByRole('button', { name: 'Set quota' }).click();
    await page.getByText('expected a whole number of seconds from 0').waitFor();
    await page.getByText('expected a whole number between 0 and 100').waitFor();
    expect(api.callsOf('setQuota')).toHaveLength(0);
    await page.getByLabel('CPU time a month').fill('600');
    await page.getByLabel('Runs at once').fill('');
    await page.getByRole('button', { name: 'Set quota' }).click();
    await page.getByRole('dialog').waitFor({ state: 'detached' });
    expect(api.callsOf('setQuota')[0].body).toEqual({ cpuSecondsPerMonth: 600, candidatesPerRun: 2000 });
  });

  it('shows a chemist the members and nothing to manage', async () => {
    const api = laboratory('chemist', {
      listMembers: () => ({
        members: [
          {
            userId: ids.me,
            name: 'Mirela Dragan',
            email: 'mirela@lindenhof.example',
            role: 'chemist',
            joinedAt: '2026-11-30T14:05:00.000Z',
            abilities: { changeRole: false, remove: false, setQuota: false },
          },
        ],
        invitations: [],
      }),
    });
    const page = await open(api, '/team');
    await page.getByRole('cell', { name: 'Mirela Dragan' }).waitFor();
    for (const name of ['Invite a member', 'Rename']) expect(await page.getByRole('button', { name }).count()).toBe(0);
    expect(api.callsOf('readUsage')).toHaveLength(0);
  });

  it('tells a person without a team what to do', async () => {
    const page = await open(laboratory('chemist', {}, meAs('chemist', { memberships: [] })), '/');
    await page.getByRole('heading', { name: 'You are in no team yet' }).waitFor();
  });
});

describePages('the account menu', (open) => {
  it('switches between teams and remembers the choice', async () => {
    const two = meAs('chemist', {
      memberships: [member('chemist'), member('reader', { teamId: ids.otherTeam, teamName: 'Harbour collaboration', isDemo: false })],
    });
    const page = await open(laboratory('chemist', {}, two), '/');
    await page.getByRole('button', { name: 'Account of Mirela Dragan' }).click();
    await page.getByRole('button', { name: 'Harbour collaboration' }).click();
    await page.waitForURL(`**/teams/${ids.otherTeam}/unknowns`);
    await page.goto(new URL('/', page.url()).href);
    await page.waitForURL(`**/teams/${ids.otherTeam}/unknowns`);
    // This team is a real one.
    expect(await page.getByText('Invented data').count()).toBe(0);
  });

  it('switches the theme and keeps it', async () => {
    const page = await open(laboratory('chemist'), '/account');
    const background = () => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
    await page.getByRole('radio', { name: 'Dark' }).check({ force: true });
    await expect.poll(background).toBe('rgb(25, 24, 22)');
    await page.reload();
    await page.getByRole('heading', { name: 'Account' }).waitFor();
    expect(await background()).toBe('rgb(25, 24, 22)');
  });

  it('shows administration only to those who may', async () => {
    const page = await open(laboratory('chemist'), '/account');
    await page.getByRole('button', { name: 'Account of Mirela Dragan' }).click();
    await page.getByRole('button', { name: 'Sign out' }).waitFor();
    expect(await page.getByRole('link', { name: 'Audit' }).count()).toBe(0);
    await page.goto(new URL('/admin/people', page.url()).href);
    await page.getByRole('heading', { name: 'This is for admins' }).waitFor();
  });
});

describePages('the account', (open) => {
  it('ends another session, never the current one', async () => {
    const api = laboratory('chemist', { endSession: () => undefined });
    const page = await open(api, '/account');
    await page.getByText('Safari on iOS').waitFor();
    expect(await page.getByRole('button', { name: 'End session' }).count()).toBe(1);
    const readsBefore = api.callsOf('listSessions').length;
    await page.getByRole('button', { name: 'End session' }).click();
    await expect.poll(() => api.callsOf('endSession').length).toBe(1);
    await expect.poll(() => api.callsOf('listSessions').length).toBeGreaterThan(readsBefore);
  });
});

describePages('administration', (open) => {
  it('asks before an account is enabled or disabled', async () => {
    const api = laboratory(
      'lead',
      { updateUser: () => new FakeProblem(409, { code: 'lastAdmin', message: 'The installation keeps at least one admin.' }) },
      admin,
    );
    const page = await open(api, '/admin/people');
    await page.getByRole('button', { name: 'Enable Jonas Petrauskas' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Enable' }).click();
    await page.getByRole('dialog').getByText('The installation keeps at least one admin.').waitFor();
    expect(api.callsOf('updateUser')[0]).toMatchObject({ params: { userId: ids.colleague }, body: { isDisabled: false } });
    // The own account cannot be changed here.
    expect(await page.getByRole('button', { name: 'Disable Mirela Dragan' }).count()).toBe(0);
  });

  it('creates a team and opens it', async () => {
    const api = laboratory(
      'lead',
      {
        createTeam: () => ({
          id: ids.otherTeam,
          name: 'Harbour',
          isDemo: false,
          createdAt: '2026-12-01T09:00:00.000Z',
          abilities: { update: true, manageMembers: true, readUsage: true, setQuotas: true },
        }),
      },
      admin,
    );
    const page = await open(api, '/admin/people');
    await page.getByRole('button', { name: 'New team' }).click();
    await page.getByLabel('Name').fill('Harbour');
    await page.getByRole('button', { name: 'Create team' }).click();
    await page.waitForURL(`**/team?team=${ids.otherTeam}`);
  });

  it('lists what was changed, in words', async () => {
    const page = await open(laboratory('lead', {}, admin), '/admin/audit');
    await page.getByRole('cell', { name: 'member change role' }).waitFor();
    await page.getByText('1–2 of 2').waitFor();
  });
});
