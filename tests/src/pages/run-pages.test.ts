import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import { FakeProblem } from '../support/fake-api';
import { ids, laboratory, unknownDetail } from '../support/fixtures';
import { describePages } from '../support/pages';
import {
  candidateDetail,
  candidateId,
  estimate,
  finishedRun,
  hopelessEstimate,
  itemOf,
  liveRun,
  liveRunId,
  progress,
  runHandlers,
} from '../support/run-fixtures';

const ranking = `/runs/${ids.run}`;
const parameters = (page: Page) => Object.fromEntries(new URL(page.url()).searchParams);
const grid = (page: Page) => page.getByRole('grid', { name: 'Candidates' });

/** Answers the event stream of the live run; the browser reconnects when a body has ended, and gets the next one. */
async function streamEvents(page: Page, bodies: string[]): Promise<void> {
  await page.route(`**/api/v1/runs/${liveRunId}/events`, async (route) => {
    const body = bodies.shift();
    if (body === undefined) await route.abort();
    else await route.fulfill({ contentType: 'text/event-stream', body });
  });
}
const event = (name: string, data: unknown) => `event: ${name}\ndata: ${JSON.stringify(data)}\n\n`;

describePages('pages of runs', (open) => {
  describe('starting a run', () => {
    it('shows the size of the search and the own quota, then goes to the run', async () => {
      const api = laboratory('chemist', runHandlers({ startRun: () => ({ ...finishedRun, number: 4 }) }));
      const page = await open(api, `/unknowns/${ids.unknown}/runs`);
      await page.getByRole('button', { name: 'Start run' }).click();
      const dialog = page.getByRole('dialog', { name: 'Start run' });
      await dialog.getByText(/24\u2009500/).waitFor();
      await dialog.getByText('1 of 4').waitFor();
      await dialog.getByLabel('Candidates to keep').fill('300');
      await dialog.getByLabel('Time limit').fill('120');
      await dialog.getByRole('button', { name: 'Start run' }).click();
      await page.waitForURL(`**${ranking}`);
      expect(api.callsOf('startRun')[0].body).toEqual({ revisionId: ids.revision, keep: 300, maxSeconds: 120, maxConstitutions: null });
    });

    it('warns of a hopeless run, says what would help most, and leads back to the evidence', async () => {
      const api = laboratory('chemist', runHandlers({ estimateRun: () => hopelessEstimate }));
      const page = await open(api, `/unknowns/${ids.unknown}/runs`, { width: 390 });
      await page.getByRole('button', { name: 'Start run' }).click();
      const dialog = page.getByRole('dialog', { name: 'Start run' });
      await dialog.getByText('This run will not end within what is left of your quota').waitFor();
      expect(await dialog.getByRole('listitem').allInnerTexts()).toEqual(hopelessEstimate.hints.map(({ text }) => text));
      await dialog.getByText(/about 105 years/).waitFor();
      await dialog.getByText('None of these is enough by itself.', { exact: false }).waitFor();
      await dialog.getByRole('link', { name: 'Back to the evidence' }).click();
      await page.waitForURL(`**/unknowns/${ids.unknown}/evidence`);
    });

    it('shows no range where its ends are the same once rounded', async () => {
      const tiny = { estimate: 2, low: 2, high: 2 };
      const nothing = { estimate: 0, low: 0, high: 0 };
      const counted = { ...estimate, ...tiny, isExact: true, survivors: tiny, quotaShare: nothing };
      const api = laboratory(
        'chemist',
        runHandlers({ estimateRun: () => ({ ...counted, cpuSeconds: 0.01, cpuSecondsLow: 0.01, cpuSecondsHigh: 0.02 }) }),
      );
      const page = await open(api, `/unknowns/${ids.unknown}/runs`);
      await page.getByRole('button', { name: 'Start run' }).click();
      const dialog = page.getByRole('dialog', { name: 'Start run' });
      await dialog.getByText('The search is small enough to be counted beforehand.').waitFor();
      const text = (await dialog.locator('dl').first().innerText()).replace(/\s+/g, ' ');
      expect(text).toContain('2 (counted)');
      expect(text).toContain('< 0.1 s');
      expect(text).not.toMatch(/about <|\(<|\(2 –/);
    });

    it('weighs the time limit that is being typed', async () => {
      const page = await open(laboratory('chemist', runHandlers()), `/unknowns/${ids.unknown}/runs`);
      await page.getByRole('button', { name: 'Start run' }).click();
      const dialog = page.getByRole('dialog', { name: 'Start run' });
      await dialog.getByText(/24\u2009500/).waitFor();
      expect(await dialog.getByText(/not end within/).count()).toBe(0);
      await dialog.getByLabel('Time limit').fill('1');
      await dialog.getByText('This run will not end within the time limit').waitFor();
      await dialog.getByLabel('Time limit').fill('');
      await dialog.getByLabel('Most constitutions').fill('20000');
      await dialog.getByText('This run may not end within the limit of constitutions').waitFor();
    });

    it('says beside the field what the quota does not allow, and sends nothing', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, `/unknowns/${ids.unknown}/runs`);
      await page.getByRole('button', { name: 'Start run' }).click();
      await page.getByLabel('Candidates to keep').fill('10001');
      await page.getByText(/between 1 and 10\u2009000/).waitFor();
      expect(await page.getByRole('dialog').getByRole('button', { name: 'Start run' }).isDisabled()).toBe(true);
      expect(api.callsOf('startRun')).toEqual([]);
    });

    it('shows a refusal with its figures', async () => {
      const refusal = new FakeProblem(409, {
        code: 'quotaExceeded',
        message: 'You have 4 of at most 4 runs under way at once. Wait for one to end, or cancel it.',
        figures: { runningCount: 4, runsAtOnce: 4 },
      });
      const page = await open(laboratory('chemist', runHandlers({ startRun: () => refusal })), `/unknowns/${ids.unknown}/runs`);
      await page.getByRole('button', { name: 'Start run' }).click();
      await page.getByRole('dialog').getByRole('button', { name: 'Start run' }).click();
      const alert = page.getByRole('dialog').getByRole('alert').filter({ hasText: 'Your quota does not allow this run' });
      await alert.waitFor();
      expect(await alert.innerText()).toMatch(/Runs going on\s*4/);
    });

    it('is not offered to readers, nor without evidence', async () => {
      const reader = await open(laboratory('reader', runHandlers()), `/unknowns/${ids.unknown}/runs`);
      await reader.getByRole('link', { name: 'Run 2' }).first().waitFor();
      expect(await reader.getByRole('button', { name: 'Start run' }).count()).toBe(0);
      const empty = await open(
        laboratory('chemist', runHandlers({ listRuns: () => ({ runs: [] }) })),
        `/unknowns/${ids.emptyUnknown}/runs`,
      );
      await empty.getByRole('heading', { name: 'A run needs a formula' }).waitFor();
      expect(await empty.getByRole('button', { name: 'Start run' }).count()).toBe(0);
    });
  });

  describe('a run that is going on', () => {
    it('follows its events and turns into the ranking when it ends', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, '/runs');
      await streamEvents(page, [
        `retry: 1500\n\n${event('progress', { ...progress, shardsDone: 90, constitutionsSeen: 555_123 })}`,
        // The first body has ended: what follows comes over a new connection.
        event('run', { ...finishedRun, id: liveRunId, number: 3 }),
      ]);
      await page.getByRole('link', { name: 'Run 3' }).first().click();
      await page.getByText('555\u2009123').first().waitFor();
      await page.getByText('90 of 240').waitFor();
      await page.getByText('Best of 612 under this model').waitFor();
      await grid(page).getByRole('link', { name: 'Open rank 1', exact: true }).waitFor();
    });

    it('can be cancelled after asking', async () => {
      const api = laboratory(
        'chemist',
        runHandlers({ cancelRun: () => ({ ...finishedRun, id: liveRunId, status: 'cancelled', complete: false }) }),
      );
      const page = await open(api, `/runs/${liveRunId}`);
      await page.getByRole('button', { name: 'Cancel run' }).click();
      expect(api.callsOf('cancelRun')).toEqual([]);
      await page.getByRole('dialog').getByRole('button', { name: 'Cancel run' }).click();
      await page.getByText('Incomplete: the run was cancelled').waitFor();
    });

    it('cannot be cancelled by somebody who may not', async () => {
      const abilities = { ...liveRun.abilities, cancel: false };
      const page = await open(laboratory('reader', runHandlers({ readRun: () => ({ ...liveRun, abilities }) })), `/runs/${liveRunId}`);
      await page.getByText('31 of 240').waitFor();
      expect(await page.getByRole('button', { name: 'Cancel run' }).count()).toBe(0);
    });

    it('says why it failed', async () => {
      const failure = { code: 'engineFault', message: 'A worker ran out of memory while planning.' };
      const failed = { ...finishedRun, status: 'failed' as const, complete: false, keptCount: 0, funnel: null, failure };
      const page = await open(laboratory('chemist', runHandlers({ readRun: () => failed })), ranking);
      await page.getByText('A worker ran out of memory while planning.').waitFor();
      expect(await grid(page).count()).toBe(0);
    });
  });

  describe('the ranking', () => {
    it('gives every count of the funnel and every reason in words', async () => {
      const page = await open(laboratory('chemist', runHandlers()), ranking);
      const figure = page.getByRole('figure', { name: 'Funnel' });
      await figure.getByText('Every count and reason as a table').click();
      const table = figure.getByRole('table');
      for (const text of ['24\u2009938', '837', '4120', 'Triple bond in a small ring', '9148', '162']) {
        expect(await table.innerText()).toContain(text);
      }
    });

    it('keeps view, order and selection in the address; both views show one selection', async () => {
      const page = await open(laboratory('chemist', runHandlers()), ranking);
      await grid(page).focus();
      await page.keyboard.press('Home');
      await page.keyboard.press('ArrowRight');
      await page.waitForURL(/selected=2/);
      await page.getByRole('button', { name: 'Table' }).click();
      await page.waitForURL(/view=table/);
      await page.getByRole('row', { selected: true }).getByText('δ 24.1 is 2 steps away').waitFor();
      await grid(page).getByRole('button', { name: '¹³C misfit' }).click();
      await page.waitForURL(/sort=carbonDeviation/);
      // The best by 13C is the last by rank.
      await grid(page).getByRole('row').nth(1).getByText('δ 24.1 is 450 steps away').waitFor();
      expect(parameters(page)).toEqual({ view: 'table', selected: '2', sort: 'carbonDeviation' });
      expect(await grid(page).getByRole('columnheader', { name: '¹³C misfit' }).getAttribute('aria-sort')).toBe('ascending');
      await page.goBack();
      await grid(page).getByRole('row').nth(1).getByText('δ 24.1 is 1 steps away').waitFor();
    });

    it('loads only the rows on screen, and any row when it is gone to', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, `${ranking}?view=table`);
      await grid(page).getByRole('row').nth(3).waitFor();
      expect(await grid(page).getByRole('row').count()).toBeLessThan(40);
      expect(await grid(page).getAttribute('aria-rowcount')).toBe('451');
      expect(api.callsOf('listCandidates').map(({ query }) => query.get('page'))).toEqual(['1']);
      await grid(page).focus();
      await page.keyboard.press('End');
      await page.getByRole('row', { selected: true }).getByText('δ 24.1 is 450 steps away').waitFor();
      expect(api.callsOf('listCandidates').map(({ query }) => query.get('page'))).toContain('3');
    });

    it('opens the selected candidate by Enter and comes back to it', async () => {
      const page = await open(laboratory('chemist', runHandlers()), `${ranking}?view=table`);
      await grid(page).focus();
      await page.keyboard.press('ArrowDown');
      await page.keyboard.press('ArrowDown');
      await page.keyboard.press('ArrowDown');
      await page.getByRole('row', { selected: true }).getByText('δ 24.1 is 3 steps away').waitFor();
      await page.keyboard.press('Enter');
      await page.getByRole('heading', { name: /Rank 3/, level: 1 }).waitFor();
      await page.goBack();
      await page.getByRole('row', { selected: true }).getByText('δ 24.1 is 3 steps away').waitFor();
      expect(parameters(page)).toEqual({ view: 'table', selected: '3' });
    });

    it('keeps by K, once, and marks what is on the shortlist', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, `${ranking}?selected=1`);
      await page.getByRole('article', { name: 'Rank 2', exact: true }).getByText('On the shortlist').waitFor();
      await grid(page).focus();
      await page.keyboard.press('k');
      await page.getByRole('article', { name: 'Rank 1', exact: true }).getByText('On the shortlist').waitFor();
      await page.keyboard.press('k');
      expect(api.callsOf('addToShortlist').map(({ body }) => body)).toEqual([{ candidateId: candidateId(1) }]);
    });

    it('does not let those keep who may not', async () => {
      const abilities = { ...finishedRun.abilities, editShortlist: false, export: false };
      const api = laboratory('reader', runHandlers({ readRun: () => ({ ...finishedRun, abilities }) }));
      const page = await open(api, `${ranking}?selected=1`);
      await grid(page).focus();
      await page.keyboard.press('k');
      expect(await page.getByRole('button', { name: 'Keep' }).count()).toBe(0);
      expect(await page.getByRole('button', { name: 'Export' }).count()).toBe(0);
      expect(api.callsOf('addToShortlist')).toEqual([]);
    });

    it('marks an incomplete run and a doubtful fit', async () => {
      const stopped = { ...finishedRun, status: 'stopped' as const, complete: false, noneOfTheseProbability: 0.71 };
      const page = await open(laboratory('chemist', runHandlers({ readRun: () => stopped })), ranking);
      await page.getByText('Incomplete: the run was stopped by a limit').waitFor();
      await page.getByText(/none of these structures is the right one/).waitFor();
      // Mean misfit of rank 1 is 5 ppm.
      await page.getByText(/Even the best candidate misses the ¹³C shifts by 5.0/).waitFor();
    });

    it('names the branches cut while building, and marks candidates and kept ones of an incomplete run', async () => {
      const cuts = [{ reason: 'ringTooSmall', text: 'A ring with fewer than 5 atoms.', count: 81_234 }];
      const stopped = { ...finishedRun, status: 'stopped' as const, complete: false, cuts };
      const handlers = runHandlers({
        readRun: () => stopped,
        readCandidate: () => ({ ...candidateDetail(1), runComplete: false }),
        readShortlist: () => ({ items: [itemOf(2, { snapshot: { ...itemOf(2).snapshot, runComplete: false } })] }),
      });
      const page = await open(laboratory('chemist', handlers), ranking);
      const building = page.getByRole('region', { name: 'Cut while building' });
      expect(await building.innerText()).toMatch(/A ring with fewer than 5 atoms\.\s*81\u2009234 branches/);
      await page.goto(new URL(`/candidates/${candidateId(1)}`, page.url()).href);
      await page.getByText('Incomplete run').waitFor();
      await page.goto(new URL(`/unknowns/${ids.unknown}/shortlist`, page.url()).href);
      await page.getByRole('article').getByText('Incomplete run').waitFor();
    });

    it('warns where the purpose is regulated, and only there', async () => {
      const regulated = laboratory('chemist', runHandlers({ readUnknown: () => unknownDetail(true, { purpose: 'regulated' }) }));
      await (await open(regulated, ranking)).getByText('A ranking is no regulated identification.', { exact: false }).waitFor();
      const research = await open(laboratory('chemist', runHandlers()), ranking);
      await grid(research).waitFor();
      expect(await research.getByText('Regulated purpose').count()).toBe(0);
    });

    it('downloads the chosen format', async () => {
      const page = await open(laboratory('chemist', runHandlers()), ranking);
      let asked = '';
      await page.route('**/export?**', async (route) => {
        asked = route.request().url();
        await route.fulfill({ body: '$$$$\n', headers: { 'Content-Disposition': 'attachment; filename="run-2.sdf"' } });
      });
      await page.getByRole('button', { name: 'Export' }).click();
      const download = page.waitForEvent('download');
      await page.getByRole('button', { name: 'SDF' }).click();
      expect((await download).suggestedFilename()).toBe('run-2.sdf');
      expect(asked).toMatch(new RegExp(`/runs/${ids.run}/export\\?format=sdf$`));
      expect(new URL(page.url()).pathname).toBe(ranking);
    });
  });

  describe('Why is X not here', () => {
    const ask = async (page: Page, smiles: string) => {
      await page.getByRole('button', { name: 'Why is X not here?' }).click();
      await page.getByLabel('Structure as SMILES').fill(smiles);
      await page.getByRole('button', { name: 'Ask' }).click();
    };

    it('names stage, reasons and atoms of a rejected structure', async () => {
      const api = laboratory(
        'chemist',
        runHandlers({
          explainStructure: () => ({
            kind: 'rejected',
            smiles: 'C#CCCCCCCCC',
            stage: 'excludedFragments',
            reasons: [{ reason: 'x0', text: 'Contains the excluded fragment C≡C', atoms: [0, 1] }],
          }),
        }),
      );
      const page = await open(api, ranking);
      await ask(page, ' C#CCCCCCCCC ');
      await page.getByText('Cut at: Excluded fragments').waitFor();
      await page.getByRole('dialog').getByText('Atoms 1, 2').waitFor();
      expect(api.callsOf('explainStructure')[0].body).toEqual({ smiles: 'C#CCCCCCCCC' });
      expect(parameters(page)).toEqual({ ask: 'C#CCCCCCCCC' });
    });

    it('leads to the candidate when the structure is there', async () => {
      const page = await open(
        laboratory(
          'chemist',
          runHandlers({
            explainStructure: () => ({ kind: 'ranked', smiles: 'CC', rank: 7, candidateId: candidateId(7), probability: 0.004 }),
          }),
        ),
        ranking,
      );
      await ask(page, 'CC');
      await page.getByRole('dialog').getByRole('link', { name: 'Open rank 7' }).click();
      await page.waitForURL(`**/candidates/${candidateId(7)}`);
    });

    it('says what is wrong with a structure it cannot read', async () => {
      const problem = new FakeProblem(422, {
        code: 'badInput',
        message: 'The structure cannot be used.',
        issues: [{ path: 'smiles', message: 'expected a structure without charges' }],
      });
      const page = await open(laboratory('chemist', runHandlers({ explainStructure: () => problem })), ranking);
      await ask(page, 'C[NH3+]');
      await page.getByText('expected a structure without charges').waitFor();
    });
  });

  describe('a candidate', () => {
    const path = `/candidates/${candidateId(2)}`;
    const firstRow = (page: Page, nucleus: string) =>
      page
        .getByRole('table', { name: new RegExp(`^${nucleus} signals`) })
        .locator('tbody tr')
        .first();

    it('starts with the signal that fits worst, and can be read by shift', async () => {
      const page = await open(laboratory('chemist', runHandlers()), path);
      expect(await firstRow(page, '13C').innerText()).toMatch(/126\.3[\s\S]*121\.0[\s\S]*conflict[\s\S]*\+5\.3/);
      await page.getByLabel('Order of the signals').selectOption('shift');
      await page.waitForURL(/order=shift/);
      await expect.poll(() => firstRow(page, '13C').innerText()).toMatch(/145\.9/);
    });

    it('marks the atoms of a line, and the lines of an atom', async () => {
      const page = await open(laboratory('chemist', runHandlers()), path);
      const drawing = page.getByRole('img', { name: 'Structure of rank 2 with atom numbers' });
      await drawing.waitFor();
      // Atoms are circles that listen; halos are circles of the group drawn first.
      const halos = drawing.locator('g[fill="currentColor"] circle');
      expect(await halos.count()).toBe(0);
      await firstRow(page, '13C').focus();
      await expect.poll(() => halos.count()).toBe(2);
      await page.keyboard.press('ArrowDown');
      await expect.poll(() => halos.count()).toBe(1);
      // Atom 8 (position 7) is the methine of the isopropyl group: one line in each table.
      await drawing.locator('circle[fill="transparent"]').nth(7).hover({ force: true });
      await expect.poll(() => page.locator('tbody tr.bg-indigo-wash').count()).toBe(2);
    });

    it('goes to its neighbours by rank', async () => {
      const page = await open(laboratory('chemist', runHandlers()), path);
      await page.getByRole('link', { name: 'Next rank' }).click();
      await page.getByRole('heading', { name: /Rank 3/, level: 1 }).waitFor();
      await page.locator('body').press('ArrowLeft');
      await page.getByRole('heading', { name: /Rank 2/, level: 1 }).waitFor();
    });

    it('says so when it does not exist', async () => {
      const page = await open(laboratory('chemist', runHandlers()), '/candidates/00000000-0000-4000-8000-000000009999');
      await page.getByRole('heading', { name: 'Nothing is kept at this address' }).waitFor();
    });
  });

  describe('the shortlist', () => {
    const path = `/unknowns/${ids.unknown}/shortlist`;

    it('saves a note by itself and a verdict at once', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, path);
      await page.getByLabel('Note').fill('Band at 815 cm-1 agrees; NOESY next.');
      await page.getByText('Saved', { exact: true }).waitFor();
      await page.getByText('Confirmed').click();
      await expect.poll(() => api.callsOf('updateShortlistItem').length).toBe(2);
      expect(api.callsOf('updateShortlistItem').map(({ body }) => body)).toEqual([
        { note: 'Band at 815 cm-1 agrees; NOESY next.' },
        { verdict: 'confirmed' },
      ]);
      await expect.poll(() => page.getByRole('radio', { name: 'Confirmed' }).isChecked()).toBe(true);
    });

    it('keeps a note that could not be saved and offers it again', async () => {
      const refused = runHandlers({
        updateShortlistItem: () => new FakeProblem(409, { code: 'gone', message: 'The item was changed elsewhere.' }),
      });
      const page = await open(laboratory('chemist', refused), path);
      await page.getByLabel('Note').fill('Half a thought');
      await page.getByText('Not saved: The item was changed elsewhere.').waitFor();
      await page.reload();
      await page.getByText('Unsaved note').waitFor();
      await page.getByRole('button', { name: 'Continue with it' }).click();
      expect(await page.getByLabel('Note').inputValue()).toBe('Half a thought');
    });

    it('strikes out after asking', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, path);
      await page.getByRole('button', { name: 'Strike out' }).click();
      await page
        .getByRole('dialog')
        .getByText(/together with its note and verdict/)
        .waitFor();
      expect(api.callsOf('removeShortlistItem')).toEqual([]);
      await page.getByRole('dialog').getByRole('button', { name: 'Strike out' }).click();
      await page.getByRole('heading', { name: 'Nothing kept yet' }).waitFor();
    });
  });

  describe('a prediction', () => {
    it('keeps the structure in the address and copies a listing that says it is predicted', async () => {
      const api = laboratory('chemist', runHandlers());
      const page = await open(api, '/predict');
      await page.getByRole('heading', { name: 'No structure yet' }).waitFor();
      await page.getByLabel('Structure as SMILES').fill('Cc1ccc(cc1)C(C)C');
      await page.getByRole('cell', { name: '146.0' }).waitFor();
      expect(parameters(page)).toEqual({ smiles: 'Cc1ccc(cc1)C(C)C' });
      await page.getByRole('button', { name: 'Copy as listing' }).first().click();
      await page.getByRole('button', { name: 'Copied' }).waitFor();
      expect(await page.evaluate(() => navigator.clipboard.readText())).toMatch(/^¹³C NMR \(predicted, CDCl₃\) δ 146\.0 \(C\), /);
    });

    it('says at the field what is wrong with a structure', async () => {
      const problem = new FakeProblem(422, {
        code: 'badInput',
        message: 'The structure cannot be used.',
        issues: [{ path: 'smiles', message: 'expected a whole structure without *' }],
      });
      const page = await open(laboratory('chemist', runHandlers({ predict: () => problem })), '/predict?smiles=*CC');
      await page.getByText('expected a whole structure without *').waitFor();
      expect(await page.getByLabel('Structure as SMILES').getAttribute('aria-invalid')).toBe('true');
    });
  });

  describe('accessibility of runs and rankings', () => {
    const PAGES: ReadonlyArray<readonly [name: string, path: string, landmark: string]> = [
      ['the runs of the team', '/runs', 'Run 2'],
      ['the runs of an unknown', `/unknowns/${ids.unknown}/runs`, 'Run 2'],
      ['a run that is going on', `/runs/${liveRunId}`, '31 of 240'],
      ['a ranking as cards', `${ranking}?selected=1`, 'Best of 612 under this model'],
      ['a ranking as a table', `${ranking}?view=table&selected=2`, 'Best of 612 under this model'],
      ['a candidate', `/candidates/${candidateId(1)}`, 'Observed δ'],
      ['a shortlist', `/unknowns/${ids.unknown}/shortlist`, 'Rank 2 of run 2'],
      ['a prediction', '/predict?smiles=Cc1ccc(cc1)C(C)C', 'benzene increments'],
    ];
    async function violations(page: Page): Promise<string[]> {
      await page.evaluate(() => document.fonts.ready);
      const result = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze();
      return result.violations.flatMap((violation) => violation.nodes.map((node) => `${violation.id}: ${node.html}`));
    }

    it.each(PAGES)('finds nothing to object to in %s, light, wide', async (_, path, landmark) => {
      const page = await open(laboratory('lead', runHandlers()), path);
      await page.getByText(landmark).filter({ visible: true }).first().waitFor();
      await page.waitForTimeout(400);
      expect(await violations(page)).toEqual([]);
    });

    it.each(PAGES)('finds nothing to object to in %s, dark, on a phone, and nothing hangs over the edge', async (_, path, landmark) => {
      const page = await open(laboratory('lead', runHandlers()), path, { width: 390, theme: 'dark' });
      await page.getByText(landmark).filter({ visible: true }).first().waitFor();
      await page.waitForTimeout(400);
      expect(await violations(page)).toEqual([]);
      expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    });
  });
});
