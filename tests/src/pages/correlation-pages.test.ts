import type { Page } from 'playwright-core';
import { expect, it } from 'vitest';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import { ids, laboratory } from '../support/fixtures';
import { describePages } from '../support/pages';

const evidencePage = `/unknowns/${ids.unknown}/evidence`;

/** Puts text on the clipboard and pastes it into the focused cell. */
async function paste(page: Page, text: string): Promise<void> {
  await page.evaluate((content) => navigator.clipboard.writeText(content), text);
  await page.keyboard.press('Control+V');
}

/** What the form asked to be saved, from the page's own request. */
interface Saved {
  evidence: EvidenceDocument;
}

describePages('pairs of 2D spectra', (open) => {
  it('are typed by keyboard, show the signals they mean, and are saved', async () => {
    const api = laboratory('chemist', {
      createRevision: ({ body }) => ({
        id: ids.revision,
        number: 4,
        author: { id: ids.me, name: 'Mirela Dragan' },
        comment: '',
        createdAt: '2026-03-02T09:15:00.000Z',
        formula: 'C10H14',
        isCurrent: true,
        unknownId: ids.unknown,
        evidence: (body as Saved).evidence,
        notes: [],
        abilities: { restore: true },
      }),
    });
    const page = await open(api, evidencePage);
    const hsqc = page.getByRole('table', { name: 'HSQC pairs' });
    await hsqc.getByLabel('Carbon shift, row 1').fill('33,8');
    await page.keyboard.press('Tab');
    await page.keyboard.type('2.87');
    await hsqc.getByText('→ 33.7').waitFor();
    await hsqc.getByText('→ 2.87').waitFor();
    await page.keyboard.press('Enter');
    expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-label'))).toBe('Proton shift, row 2');
    const hmbc = page.getByRole('table', { name: 'HMBC pairs' });
    await hmbc.getByLabel('Proton shift, row 1').fill('2.90');
    await hmbc.getByLabel('Carbon shift, row 1').fill('180');
    await hmbc.getByText('no such signal').waitFor();
    await hmbc.getByLabel('Carbon shift, row 1').fill('145.9');
    await hmbc.getByText('→ 145.9').waitFor();
    await page.getByLabel('Exceptions').fill('1');
    await page.getByRole('button', { name: 'Save revision' }).click();
    await expect.poll(() => api.callsOf('createRevision').length).toBe(1);
    const { evidence } = api.callsOf('createRevision')[0].body as Saved;
    expect(evidence.correlations).toEqual({
      hsqc: [[33.8, 2.87]],
      hmbc: [[2.9, 145.9]],
      cosy: [],
      hmbcBonds: 3,
      cosyBonds: 3,
      exceptions: 1,
    });
  });

  it('are pasted as two columns, in whichever order the nuclei stand', async () => {
    const page = await open(laboratory('chemist'), evidencePage);
    const hmbc = page.getByRole('table', { name: 'HMBC pairs' });
    await hmbc.getByLabel('Proton shift, row 1').click();
    await paste(page, '13C\t1H\n145.9\t2.87\n126.3\t2.87\n24.1\t2.87');
    await page.getByText(/3 rows pasted.*columns exchanged/).waitFor();
    expect(await hmbc.getByLabel('Proton shift, row 2').inputValue()).toBe('2.87');
    expect(await hmbc.getByLabel('Carbon shift, row 3').inputValue()).toBe('24.1');
    await page.getByText('3 pairs', { exact: true }).waitFor();
  });

  it('say beside the cell what is wrong with them', async () => {
    const page = await open(laboratory('chemist'), evidencePage);
    const cosy = page.getByRole('table', { name: 'COSY pairs' });
    await cosy.getByLabel('First proton shift, row 1').fill('7.12');
    await cosy.getByText('Second proton shift: expected a number between -5 and 25 ppm').waitFor();
    await page.getByLabel('Attached hydrogens, row 1').fill('0');
    const hsqc = page.getByRole('table', { name: 'HSQC pairs' });
    await cosy.getByLabel('Second proton shift, row 1').fill('2.87');
    await hsqc.getByLabel('Carbon shift, row 1').fill('145.9');
    await hsqc.getByLabel('Proton shift, row 1').fill('7.12');
    await cosy.getByLabel('Second proton shift, row 1').fill('7.1');
    await cosy.getByText('same signal').waitFor();
    await hsqc.getByText('the 13C signal at 145.9 ppm has 0 attached hydrogens; correct it or remove the pair').waitFor();
  });
});
