import { mkdirSync, rmSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { Molecule } from 'openchemlib';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type BuiltServer, startBuiltServer } from '../support/built-server.js';
import { createTemporaryFolder } from '../support/config.js';
import { hasBrowser, launchBrowser } from '../src/support/browser.js';

/** Screenshots stay here after the run. */
const ARTEFACTS = resolve(import.meta.dirname, '../../test-artefacts');
const PASSWORD = 'linen-and-madder-7';

let folder: string;
let server: BuiltServer;
let browser: Browser;
let chemist: BrowserContext;

beforeAll(async () => {
  if (!hasBrowser) return;
  mkdirSync(ARTEFACTS, { recursive: true });
  folder = createTemporaryFolder();
  server = await startBuiltServer({
    dataDirectory: join(folder, 'data'),
    environment: { DEMO: 'false', ADMIN_EMAIL: 'first@example.org' },
  });
  browser = await launchBrowser();
  chemist = await browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true });
});
afterAll(async () => {
  if (!hasBrowser) return;
  await browser?.close();
  await server?.stop();
  rmSync(folder, { recursive: true, force: true });
});

/** Calls the API from a page, with its cookies. */
async function call<T>(page: Page, method: string, path: string, body: unknown): Promise<T> {
  return page.evaluate(
    async ([verb, url, payload]) => {
      const response = await fetch(`/api/v1${url}`, {
        method: verb as string,
        headers: { 'Content-Type': 'application/json', 'X-Isoloom-Request': '1' },
        body: JSON.stringify(payload),
      });
      if (!response.ok) throw new Error(`${url}: ${response.status} ${await response.text()}`);
      return (await response.json()) as T;
    },
    [method, path, body] as const,
  );
}

async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.goto(`${server.url}/sign-in`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

/** Pastes text into the focused cell as a spreadsheet puts it on the clipboard. */
async function pasteInto(page: Page, table: string, text: string): Promise<void> {
  await page.getByRole('table', { name: table }).getByLabel('Shift, row 1', { exact: true }).focus();
  await page.evaluate((block) => {
    const data = new DataTransfer();
    data.setData('text/plain', block);
    document.activeElement?.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }));
  }, text);
}

interface Case {
  name: string;
  title: string;
  formula: string;
  fragments: readonly string[];
  carbons: string;
  protons: string;
  /** What the sample is. */
  truth: string;
}

/** Signals: SCIENCE.md 11 (Babij et al., Org. Process Res. Dev. 2016, 20, 661), rows 26 and 18; CDCl3. */
const CASES: readonly Case[] = [
  {
    name: 'p-cymene',
    title: 'Oil from a steam distillate',
    formula: 'C10H14',
    fragments: ['1,4-Phenylene (para)', 'Isopropyl'],
    carbons: '145.89\tC\n135.14\tC\n128.98\tCH\n126.28\tCH\n33.70\tCH\n24.10\tCH3\n20.95\tCH3\n',
    protons: '7.11\t4\tm\n2.87\t1\tsept\t6.9\n2.32\t3\ts\n1.24\t6\td\t6.9\n',
    truth: 'CC(C)c1ccc(C)cc1',
  },
  {
    name: 'isoamyl-acetate',
    title: 'Volatile with a fruity smell',
    formula: 'C7H14O2',
    fragments: ['Ester or lactone'],
    carbons: '171.2\tC\n63.56\tCH2\n37.29\tCH2\n25.09\tCH\n22.45\tCH3\n21.05\tCH3\n',
    protons: '4.10\t2\tt\t6.8\n2.05\t3\ts\n1.68\t1\tm\n1.50\t2\tq\t6.9\n0.92\t6\td\t6.6\n',
    truth: 'CC(C)CCOC(C)=O',
  },
];

describe.skipIf(!hasBrowser)('identifying an unknown in the browser', () => {
  it('an invited chemist sets a password and signs in', async () => {
    const adminPassword = /first@example\.org\s+(\S+)/.exec(server.output())?.[1] ?? '';
    const admin = await browser.newContext();
    const adminPage = await admin.newPage();
    await signIn(adminPage, 'first@example.org', adminPassword);
    const team = await call<{ id: string }>(adminPage, 'POST', '/teams', { name: 'Bench of tests' });
    const { link } = await call<{ link: string }>(adminPage, 'POST', `/teams/${team.id}/invitations`, {
      email: 'chemist@example.org',
      role: 'chemist',
    });
    await admin.close();

    const page = await chemist.newPage();
    await page.goto(server.url + new URL(link).pathname);
    await page.getByLabel('Your name').fill('Chemist of tests');
    await page.locator('input[type="password"]').fill(PASSWORD);
    await page.getByRole('button', { name: 'Join the team' }).click();
    await page.getByRole('heading', { name: 'Unknowns', exact: true }).waitFor();
    await chemist.clearCookies();
    await signIn(page, 'chemist@example.org', PASSWORD);
    await page.getByRole('heading', { name: 'Unknowns', exact: true }).waitFor();
    await page.close();
  });

  it.each(CASES)('$name goes from evidence to an exported SDF', async ({ name, title, formula, fragments, carbons, protons, truth }) => {
    const page = await chemist.newPage();
    const faults: string[] = [];
    page.on('pageerror', (error) => faults.push(error.message));
    page.on('console', (message) => {
      if (message.type() === 'error') faults.push(message.text());
    });
    const keep = (step: string) => page.screenshot({ path: join(ARTEFACTS, `${name}-${step}.png`), fullPage: true });

    await page.goto(server.url);
    await page.getByRole('button', { name: 'New unknown' }).first().click();
    await page.getByRole('textbox', { name: 'Title' }).fill(title);
    await page
      .getByRole('dialog')
      .getByRole('button', { name: /Create/ })
      .click();
    await page.getByRole('textbox', { name: 'Formula' }).fill(formula);
    await page.getByRole('button', { name: 'Add required fragment' }).click();
    for (const fragment of fragments) {
      await page.getByPlaceholder('Search by name, kind or SMILES').fill(fragment);
      await page.getByRole('button', { name: `Add ${fragment}`, exact: true }).click();
    }
    await page.getByRole('button', { name: 'Done' }).click();
    await pasteInto(page, '13C signals', carbons);
    await pasteInto(page, '1H signals', protons);
    await page.getByText('fits', { exact: true }).first().waitFor();
    await keep('1-evidence');
    await page.getByRole('button', { name: 'Save revision' }).click();

    await page.getByRole('link', { name: 'Go to the runs' }).click();
    await page.getByRole('button', { name: 'Start run' }).first().click();
    await page.getByRole('dialog').getByRole('button', { name: 'Start run' }).click();
    await page.waitForURL(/\/runs\/[0-9a-f-]+$/);
    await page.getByText('Finished', { exact: true }).first().waitFor({ timeout: 120_000 });
    await page.getByRole('button', { name: 'Export' }).waitFor();
    await keep('2-ranking');

    const runId = /runs\/([0-9a-f-]+)/.exec(page.url())![1]!;
    const best = await page.evaluate(async (id) => {
      const response = await fetch(`/api/v1/runs/${id}/candidates?pageSize=1`);
      return ((await response.json()) as { rows: { id: string; smiles: string; rank: number }[] }).rows[0]!;
    }, runId);
    expect(Molecule.fromSmiles(best.smiles).getIDCode()).toBe(Molecule.fromSmiles(truth).getIDCode());

    await page.getByRole('button', { name: 'Export' }).click();
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: /^SDF/ }).click()]);
    const sdf = await readFile(await download.path(), 'utf8');
    expect(download.suggestedFilename()).toMatch(/\.sdf$/);
    const records = sdf.split('$$$$').filter((record) => record.trim() !== '');
    expect(records[0]).toContain('V2000');
    expect(Molecule.fromMolfile(records[0]!.replace(/^\r?\n/, '')).getIDCode()).toBe(Molecule.fromSmiles(truth).getIDCode());

    await page.goto(`${server.url}/candidates/${best.id}`);
    await page.getByRole('table').first().waitFor();
    await keep('3-candidate');
    await page.setViewportSize({ width: 390, height: 844 });
    await page.goto(`${server.url}/runs/${runId}`);
    await page.getByText('Finished', { exact: true }).first().waitFor();
    await keep('4-ranking-phone');
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    expect(faults).toEqual([]);
    await page.close();
  });
});
