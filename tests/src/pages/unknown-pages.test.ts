import { expect, it } from 'vitest';
import { FakeProblem } from '../support/fake-api';
import { ids, laboratory, unknownDetail, unknownRows } from '../support/fixtures';
import { describePages } from '../support/pages';

const list = `/teams/${ids.team}/unknowns`;

describePages('the list of unknowns', (open) => {
  it('keeps search, status, order and page in the address, and back works', async () => {
    const api = laboratory('chemist');
    const page = await open(api, list);
    await page.getByRole('link', { name: 'Late-eluting impurity of batch 7' }).waitFor();
    await page.getByLabel('Status').selectOption('settled');
    await page.getByRole('link', { name: 'Floral note' }).waitFor();
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor({ state: 'detached' });
    await page.getByRole('button', { name: 'Title' }).click();
    await page.waitForURL(/sort=title&direction=ascending/);
    expect(new URL(page.url()).search).toBe('?status=settled&sort=title&direction=ascending');
    await page.goBack();
    await page.goBack();
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor();
    expect(await page.getByLabel('Status').inputValue()).toBe('all');
  });

  it('asks the server for what the address says', async () => {
    const api = laboratory('chemist');
    const page = await open(api, `${list}?search=C10&sort=formula&direction=ascending&page=2`);
    await page.getByRole('region', { name: 'Unknowns' }).waitFor();
    const query = Object.fromEntries(api.callsOf('listUnknowns')[0].query);
    expect(query).toMatchObject({ search: 'C10', sort: 'formula', direction: 'ascending', page: '2' });
    expect(await page.getByRole('searchbox').inputValue()).toBe('C10');
  });

  it('ignores nonsense in the address', async () => {
    const api = laboratory('chemist');
    const page = await open(api, `${list}?status=lost&page=-3&sort=colour`);
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor();
    expect(Object.fromEntries(api.callsOf('listUnknowns')[0].query)).toMatchObject({ status: 'all', page: '1', sort: 'updatedAt' });
  });

  it('goes back to the first page when the search changes', async () => {
    const api = laboratory('chemist');
    const page = await open(api, `${list}?page=2`);
    await page.getByRole('searchbox').fill('nitration');
    await page.waitForURL(/search=nitration/);
    expect(new URL(page.url()).search).toBe('?search=nitration');
  });

  it('says what will be here while it is empty', async () => {
    const api = laboratory('chemist', { listUnknowns: () => ({ rows: [], total: 0, page: 1, pageSize: 25 }) });
    const page = await open(api, list);
    await page.getByRole('heading', { name: 'No unknowns yet' }).waitFor();
    expect(await page.getByRole('button', { name: 'New unknown' }).count()).toBe(2);
  });

  it('shows a failure in place and tries again', async () => {
    const api = laboratory('chemist', {
      listUnknowns: () => new FakeProblem(403, { code: 'forbidden', message: 'You may not read this team.' }),
    });
    const page = await open(api, list);
    await page.getByText('You may not read this team.').waitFor();
    api.on('listUnknowns', () => ({ rows: unknownRows, total: 6, page: 1, pageSize: 25 }));
    await page.getByRole('button', { name: 'Try again' }).click();
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor();
  });

  it('creates an unknown and opens its evidence', async () => {
    const api = laboratory('chemist', {
      createUnknown: () => unknownDetail(true, { id: ids.emptyUnknown, title: 'Yellow band', currentRevisionId: null, lastRun: null }),
    });
    const page = await open(api, list);
    await page.getByRole('button', { name: 'New unknown' }).click();
    await page.getByRole('button', { name: 'Create unknown' }).click();
    await page.getByText('expected a title').waitFor();
    await page.getByLabel('Title', { exact: true }).fill('  Yellow band ');
    await page.getByLabel('Purpose').selectOption('regulated');
    await page.getByText(/belongs to an accredited laboratory/).waitFor();
    await page.getByRole('button', { name: 'Create unknown' }).click();
    await page.waitForURL(`**/unknowns/${ids.emptyUnknown}/evidence`);
    expect(api.callsOf('createUnknown')[0].body).toEqual({ title: 'Yellow band', description: '', purpose: 'regulated' });
  });

  it('shows a reader nothing to change', async () => {
    const page = await open(laboratory('reader'), list);
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor();
    expect(await page.getByRole('button', { name: 'New unknown' }).count()).toBe(0);
  });

  it('marks a team of the demo', async () => {
    const page = await open(laboratory('chemist'), list);
    await page.getByText('Invented data').first().waitFor();
  });

  it('can be walked by keyboard alone', async () => {
    const page = await open(laboratory('chemist'), list);
    await page.getByRole('link', { name: 'Late-eluting' }).waitFor();
    await page.keyboard.press('Tab');
    expect(await page.locator(':focus').textContent()).toBe('Go to the content');
    const seen: string[] = [];
    for (let step = 0; step < 24; step++) {
      await page.keyboard.press('Tab');
      seen.push(await page.evaluate(() => document.activeElement?.textContent ?? ''));
    }
    expect(seen).toEqual(
      expect.arrayContaining(['Unknowns', 'Runs', 'Fragments', 'Team', 'New unknown', 'Late-eluting impurity of batch 7']),
    );
  });
});

describePages('an unknown', (open) => {
  it('opens on its runs when there are any, else on its evidence', async () => {
    const page = await open(laboratory('chemist'), `/unknowns/${ids.unknown}`);
    await page.waitForURL(`**/unknowns/${ids.unknown}/runs`);
    await page.goto(new URL(`/unknowns/${ids.emptyUnknown}`, page.url()).href);
    await page.waitForURL(`**/unknowns/${ids.emptyUnknown}/evidence`);
  });

  it('shows what is known beside the work', async () => {
    const page = await open(laboratory('chemist'), `/unknowns/${ids.unknown}/comments`);
    const record = page.getByRole('complementary', { name: 'Record' });
    await record.getByText('7 signals').waitFor();
    await record.getByText('4 signals').waitFor();
    await record.getByRole('img', { name: '1,4-disubstituted benzene ring' }).waitFor();
    expect(await record.getByRole('heading', { level: 1 }).textContent()).toBe('Late-eluting impurity of batch 7');
  });

  it('lets the window of a carbon signal be changed by keyboard, switched off and given back to the shift', async () => {
    const page = await open(laboratory('chemist'), `/unknowns/${ids.unknown}/evidence`, { width: 390 });
    const cell = page.getByRole('button', { name: /^Window, row 2/ });
    await expect.poll(() => cell.getAttribute('aria-label')).toMatch(/sp².*from the shift/);
    await cell.focus();
    await page.keyboard.press('Enter');
    const editor = page.getByRole('dialog', { name: /^Window of the signal/ });
    await editor.getByLabel('sp³').waitFor();
    await page.keyboard.press('Space');
    await expect.poll(() => cell.getAttribute('aria-label')).toMatch(/sp³ or sp².*set by hand/);
    await editor.getByRole('button', { name: 'No window' }).click();
    await expect.poll(() => cell.getAttribute('aria-label')).toMatch(/none, switched off/);
    await editor.getByRole('button', { name: 'As the shift says' }).click();
    await expect.poll(() => cell.getAttribute('aria-label')).toMatch(/from the shift/);
    await page.keyboard.press('Escape');
    await expect.poll(() => editor.count()).toBe(0);
  });

  it('changes the status at once and tells the list', async () => {
    const api = laboratory('lead', { updateUnknown: ({ body }) => unknownDetail(true, body as object) });
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByLabel('Status').selectOption('settled');
    await expect.poll(() => api.callsOf('updateUnknown').map((call) => call.body)).toEqual([{ status: 'settled' }]);
    await expect.poll(() => page.getByLabel('Status').inputValue()).toBe('settled');
  });

  it('is shelved after a question, and taken up again', async () => {
    const api = laboratory('chemist', { updateUnknown: ({ body }) => unknownDetail(true, body as object) });
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByRole('button', { name: 'Shelve' }).click();
    const dialog = page.getByRole('dialog', { name: 'Shelve U-0042?' });
    await dialog.getByRole('button', { name: 'Cancel' }).click();
    expect(api.callsOf('updateUnknown')).toHaveLength(0);
    await page.getByRole('button', { name: 'Shelve' }).click();
    await dialog.getByRole('button', { name: 'Shelve' }).click();
    await page.getByRole('button', { name: 'Take up again' }).click();
    await expect
      .poll(() => api.callsOf('updateUnknown').map((call) => call.body))
      .toEqual([{ status: 'shelved' }, { status: 'inProgress' }]);
  });

  it('edits the record and shows the server’s objection beside the field', async () => {
    const api = laboratory('chemist', {
      updateUnknown: () =>
        new FakeProblem(422, {
          code: 'badInput',
          message: 'Check the fields.',
          issues: [{ path: 'title', message: 'expected a title nobody else uses' }],
        }),
    });
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByRole('button', { name: 'Edit record' }).click();
    await page.getByLabel('Title').fill('Twice');
    await page.getByRole('button', { name: 'Save' }).click();
    await page.getByText('expected a title nobody else uses').waitFor();
    expect(await page.getByLabel('Title').getAttribute('aria-invalid')).toBe('true');
  });

  it('lets a reader comment and change nothing else', async () => {
    const page = await open(laboratory('reader'), `/unknowns/${ids.unknown}/comments`);
    await page.getByRole('button', { name: 'Add comment' }).waitFor();
    for (const name of ['Edit record', 'Shelve']) expect(await page.getByRole('button', { name }).count()).toBe(0);
    expect(await page.getByLabel('Status').count()).toBe(0);
  });

  it('that does not exist for this person says so and offers a way on', async () => {
    const api = laboratory('chemist', { readUnknown: () => new FakeProblem(404, { code: 'notFound', message: 'No such unknown.' }) });
    const page = await open(api, `/unknowns/${ids.unknown}/comments`);
    await page.getByRole('heading', { name: 'Nothing is kept at this address' }).waitFor();
    await page.getByRole('link', { name: 'Go to the unknowns' }).click();
    await page.getByRole('heading', { name: 'Unknowns' }).waitFor();
  });

  it('folds the record above the work on a phone', async () => {
    const page = await open(laboratory('chemist'), `/unknowns/${ids.unknown}/comments`, { width: 390 });
    const toggle = page.getByRole('button', { name: 'What we know' });
    await toggle.waitFor();
    expect(await page.getByText('7 signals').isVisible()).toBe(false);
    await toggle.click();
    await page.getByText('7 signals').waitFor();
    const width = await page.evaluate(() => document.documentElement.scrollWidth);
    expect(width).toBeLessThanOrEqual(390);
  });
});
