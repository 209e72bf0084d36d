import { expect, it } from 'vitest';
import { FakeProblem } from '../support/fake-api';
import { ids, laboratory, meAs } from '../support/fixtures';
import { describePages } from '../support/pages';

const noSession = () => new FakeProblem(401, { code: 'noSession', message: 'Sign in to continue.' });
const token = 'a'.repeat(43);

describePages('signing in', (open) => {
  it('comes back to the page that was asked for', async () => {
    const api = laboratory('chemist', { me: noSession });
    const page = await open(api, `/teams/${ids.team}/unknowns?status=new`);
    await page.getByRole('heading', { name: 'Sign in' }).waitFor();
    api.on('me', () => meAs('chemist'));
    api.on('signIn', () => meAs('chemist'));
    await page.getByLabel('E-mail').fill('Mirela@Lindenhof.example');
    await page.getByLabel('Password').fill('three plain words');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('heading', { name: 'Unknowns' }).waitFor();
    expect(new URL(page.url()).search).toBe('?status=new');
    expect(api.callsOf('signIn')[0].body).toEqual({ email: 'mirela@lindenhof.example', password: 'three plain words' });
  });

  it('does not follow a next address of another site', async () => {
    const api = laboratory('chemist', { signIn: () => meAs('chemist') });
    const page = await open(api, '/sign-in?next=//elsewhere.example/x');
    const home = new URL(page.url()).origin;
    await page.getByLabel('E-mail').fill('mirela@lindenhof.example');
    await page.getByLabel('Password').fill('three plain words');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('heading', { name: 'Unknowns' }).waitFor();
    expect(new URL(page.url()).origin).toBe(home);
  });

  it('names the field and the cure before anything is sent', async () => {
    const api = laboratory('chemist', { me: noSession });
    const page = await open(api, '/sign-in');
    await page.getByLabel('E-mail').fill('mirela');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('expected an e-mail address').waitFor();
    await page.getByText('expected your password').waitFor();
    expect(api.callsOf('signIn')).toHaveLength(0);
  });

  it('shows the refusal of the server and keeps what was typed', async () => {
    const api = laboratory('chemist', {
      me: noSession,
      signIn: () => new FakeProblem(401, { code: 'signInFailed', message: 'E-mail or password is wrong.' }),
    });
    const page = await open(api, '/sign-in');
    await page.getByLabel('E-mail').fill('mirela@lindenhof.example');
    await page.getByLabel('Password').fill('wrong');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('E-mail or password is wrong.').waitFor();
    expect(await page.getByLabel('E-mail').inputValue()).toBe('mirela@lindenhof.example');
  });

  it('offers the accounts of the demo, marked as invented', async () => {
    const api = laboratory('chemist', {
      me: noSession,
      readInstallation: () => ({
        demoAccounts: [{ email: 'aino@lindenhof.example', name: 'Aino Lehtonen', role: 'reader', password: 'invented-password' }],
      }),
    });
    const page = await open(api, '/sign-in');
    await page.getByText('Invented data').waitFor();
    await page.getByRole('button', { name: /Aino Lehtonen/ }).click();
    expect(await page.getByLabel('E-mail').inputValue()).toBe('aino@lindenhof.example');
    expect(await page.getByLabel('Password').inputValue()).toBe('invented-password');
  });
});

describePages('links by mail', (open) => {
  it('an invitation of a new address asks for name and password and joins', async () => {
    const api = laboratory('reader', {
      readInvitation: () => ({
        email: 'new@lindenhof.example',
        teamName: 'Lindenhof laboratory',
        role: 'reader',
        invitedBy: 'Mirela Dragan',
        expiresAt: '2026-12-07T14:05:00.000Z',
        needsAccount: true,
      }),
      acceptInvitation: () => meAs('reader'),
    });
    const page = await open(api, `/invitation/${token}`);
    await page.getByRole('heading', { name: 'Join Lindenhof laboratory' }).waitFor();
    await page.getByLabel('Your name').fill('Noor Haddad');
    await page.getByLabel('New password').fill('short');
    await page.getByRole('button', { name: 'Join the team' }).click();
    await page.getByText('expected at least 10 characters').waitFor();
    expect(api.callsOf('acceptInvitation')).toHaveLength(0);
    await page.getByLabel('New password').fill('three plain words');
    await page.getByRole('button', { name: 'Join the team' }).click();
    await page.getByRole('heading', { name: 'Unknowns' }).waitFor();
    expect(api.callsOf('acceptInvitation')[0]).toMatchObject({
      params: { token },
      body: { name: 'Noor Haddad', password: 'three plain words' },
    });
  });

  it('a used-up invitation says what to do', async () => {
    const api = laboratory('reader', {
      readInvitation: () => new FakeProblem(404, { code: 'linkUsedUp', message: 'This link has been used or has run out.' }),
    });
    const page = await open(api, `/invitation/${token}`);
    await page.getByText('This link has been used or has run out.').waitFor();
    await page.getByText(/Ask the person who invited you/).waitFor();
  });

  it('a reset link sets a new password', async () => {
    const api = laboratory('chemist', { me: noSession, resetPassword: () => undefined });
    const page = await open(api, `/reset/${token}`);
    await page.getByLabel('New password').fill('another three words');
    await page.getByRole('button', { name: 'Set password' }).click();
    await page.getByRole('heading', { name: 'The new password is set' }).waitFor();
    expect(api.callsOf('resetPassword')[0]).toMatchObject({ params: { token }, body: { password: 'another three words' } });
  });

  it('asking for a reset tells nobody whether the address is known', async () => {
    const api = laboratory('chemist', { me: noSession, requestPasswordReset: () => undefined });
    const page = await open(api, '/reset');
    await page.getByLabel('E-mail').fill('somebody@lindenhof.example');
    await page.getByRole('button', { name: 'Send link' }).click();
    await page.getByText(/If somebody@lindenhof.example belongs to an account/).waitFor();
  });
});

describePages('a session that ends while somebody writes', (open) => {
  it('is asked for again over the page, and nothing typed is lost', async () => {
    const api = laboratory('chemist', { createComment: noSession });
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    const field = page.getByLabel('Comment', { exact: true });
    await field.fill('The quartet needs a second look.');
    await page.getByRole('button', { name: 'Add comment' }).click();
    const dialog = page.getByRole('dialog', { name: 'Sign in again' });
    await dialog.waitFor();
    api.on('signIn', () => meAs('chemist'));
    api.on('createComment', ({ body }) => ({
      id: '00000000-0000-4000-8000-000000000099',
      author: { id: ids.me, name: 'Mirela Dragan' },
      text: (body as { text: string }).text,
      createdAt: '2026-12-01T09:00:00.000Z',
      abilities: { remove: true },
    }));
    await dialog.getByLabel('Password').fill('three plain words');
    await dialog.getByRole('button', { name: 'Sign in', exact: true }).click();
    await dialog.waitFor({ state: 'detached' });
    expect(await field.inputValue()).toBe('The quartet needs a second look.');
    await page.getByRole('button', { name: 'Add comment' }).click();
    await page.getByRole('listitem').filter({ hasText: 'The quartet needs a second look.' }).waitFor();
    expect(await field.inputValue()).toBe('');
  });

  it('offers the edit again after the tab was closed', async () => {
    const api = laboratory('chemist');
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByLabel('Comment', { exact: true }).fill('Kept for later.');
    await page.reload();
    await page.getByRole('button', { name: 'Continue with it' }).click();
    expect(await page.getByLabel('Comment', { exact: true }).inputValue()).toBe('Kept for later.');
  });

  it('does not offer the edit to somebody else on the same machine', async () => {
    const api = laboratory('chemist');
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByLabel('Comment', { exact: true }).fill('Only mine.');
    api.on('me', () =>
      meAs('chemist', { user: { id: ids.colleague, name: 'Jonas Petrauskas', email: 'jonas@lindenhof.example', isAdmin: false } }),
    );
    await page.reload();
    await page.getByText('The methyl doublet integrates for six').waitFor();
    expect(await page.getByRole('button', { name: 'Continue with it' }).count()).toBe(0);
  });
});
