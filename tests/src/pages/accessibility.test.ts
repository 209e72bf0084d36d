import { AxeBuilder } from '@axe-core/playwright';
import { expect, it } from 'vitest';
import { FakeProblem } from '../support/fake-api';
import { ids, laboratory, meAs } from '../support/fixtures';
import { describePages, type OpenPage } from '../support/pages';

const admin = meAs('lead', { abilities: { createTeam: true, manageUsers: true, readAudit: true } });
const signedOut = () => laboratory('lead', { me: () => new FakeProblem(401, { code: 'noSession', message: 'Sign in to continue.' }) });

const PAGES: ReadonlyArray<readonly [name: string, path: string, heading: string]> = [
  ['the list of unknowns', `/teams/${ids.team}/unknowns`, 'Unknowns'],
  ['an unknown', `/unknowns/${ids.unknown}/comments`, 'Late-eluting impurity of batch 7'],
  ['the team', '/team', 'Lindenhof laboratory'],
  ['the account', '/account', 'Account'],
  ['people', '/admin/people', 'People of the installation'],
  ['audit', '/admin/audit', 'Audit'],
];

/** WCAG 2.2 A and AA rules that axe can check by itself. */
async function violations(page: Awaited<ReturnType<OpenPage>>): Promise<string[]> {
  await page.evaluate(() => document.fonts.ready);
  const result = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze();
  return result.violations.flatMap((violation) => violation.nodes.map((node) => `${violation.id}: ${node.html}`));
}

describePages('accessibility', (open) => {
  it.each(PAGES)('finds nothing to object to in %s, light, wide', async (_, path, heading) => {
    const page = await open(laboratory('lead', {}, admin), path);
    await page.getByRole('heading', { name: heading, level: 1 }).waitFor();
    await page.waitForLoadState('networkidle');
    expect(await violations(page)).toEqual([]);
  });

  it.each(PAGES)('finds nothing to object to in %s, dark, on a phone, and nothing hangs over the edge', async (_, path, heading) => {
    const page = await open(laboratory('lead', {}, admin), path, { width: 390, theme: 'dark' });
    await page.getByRole('heading', { name: heading, level: 1 }).waitFor();
    await page.waitForLoadState('networkidle');
    expect(await violations(page)).toEqual([]);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
  });

  it('finds nothing to object to in sign-in with errors shown', async () => {
    const page = await open(signedOut(), '/sign-in');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('expected your password').waitFor();
    expect(await violations(page)).toEqual([]);
  });

  it('finds nothing to object to in a dialog, and focus stays inside', async () => {
    const page = await open(laboratory('lead'), `/teams/${ids.team}/unknowns`);
    await page.getByRole('button', { name: 'New unknown' }).click();
    await page.getByRole('dialog').waitFor();
    expect(await violations(page)).toEqual([]);
    for (let step = 0; step < 12; step++) {
      await page.keyboard.press('Tab');
      // Between the last and the first control focus may rest on the browser itself, never on the page behind.
      expect(
        await page.evaluate(() => document.activeElement === document.body || document.activeElement?.closest('dialog') !== null),
      ).toBe(true);
    }
    await page.keyboard.press('Escape');
    await page.getByRole('dialog').waitFor({ state: 'detached' });
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('New unknown');
  });
});
