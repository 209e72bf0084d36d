import { describe, expect, it } from 'vitest';
import { parseBandTable, parsePeakTable } from '../../../shared/chemistry/paste-bands.js';

describe('IR bands pasted from a spreadsheet', () => {
  it('are a wavenumber and, if there is one, an intensity in letters or words', () => {
    const { cells, notes } = parseBandTable('wavenumber\tint.\n3350 cm-1\tbr\n1718\tS\n1602\t\n815\tvery loud\textra');
    expect(cells).toEqual([
      { wavenumber: '3350', intensity: 'broad' },
      { wavenumber: '1718', intensity: 'strong' },
      { wavenumber: '1602', intensity: '' },
      { wavenumber: '815', intensity: 'very loud' },
    ]);
    expect(notes).toEqual(['Line 1 skipped: heading', 'Line 5: cells beyond the second are not used']);
  });
});

describe('mass peaks pasted from a spreadsheet', () => {
  it('are m/z and, if there is one, an intensity', () => {
    expect(parsePeakTable('119,049;100 %\n91,054;35,5').cells).toEqual([
      { mz: '119.049', intensity: '100' },
      { mz: '91.054', intensity: '35.5' },
    ]);
  });

  it('stop where the document does', () => {
    const { cells, notes } = parsePeakTable(Array.from({ length: 420 }, (_, k) => `${50 + k}\t1`).join('\n'));
    expect(cells).toHaveLength(400);
    expect(notes).toEqual(['only the first 400 peaks are taken']);
  });
});
