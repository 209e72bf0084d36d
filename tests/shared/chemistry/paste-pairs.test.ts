import { describe, expect, it } from 'vitest';
import { parsePairTable } from '../../../shared/chemistry/paste-pairs.js';

const pairsOf = (text: string, kind: 'cosy' | 'hsqc' | 'hmbc'): [string, string][] =>
  parsePairTable(text, kind).cells.map(({ first, second }) => [first, second]);

describe('pairs pasted from a spreadsheet', () => {
  it('are read with tabs, semicolons, blanks, decimal commas and units', () => {
    const expected = [
      ['4.35', '166.9'],
      ['1.20', '60.8'],
    ];
    for (const text of [
      '4.35\t166.9\n1.20\t60.8',
      '4.35; 166.9\r\n1.20; 60.8\r\n',
      '4.35 166.9\n\n1.20 60.8',
      '4,35\t166,9\n1,20\t60,8',
      '4.35 ppm\t166.9 ppm\n1.20 ppm\t60.8 ppm',
    ]) {
      expect(pairsOf(text, 'hmbc')).toEqual(expected);
    }
  });

  it('change places where a heading or an impossible proton shift says so', () => {
    expect(pairsOf('F1 (13C)\tF2 (1H)\n14.1\t1.2', 'hmbc')).toEqual([['1.2', '14.1']]);
    expect(pairsOf('1H\t13C\n1.2\t14.1', 'hsqc')).toEqual([['14.1', '1.2']]);
    expect(pairsOf('1.2\t14.1\n4.35\t60.8', 'hsqc')).toEqual([
      ['14.1', '1.2'],
      ['60.8', '4.35'],
    ]);
    expect(parsePairTable('60.8\t4.35', 'hmbc').notes).toContain('columns exchanged, so that protons and carbons stand where they belong');
    // Nothing tells these apart, so the order of the form holds.
    expect(pairsOf('1.2\t14.1', 'hmbc')).toEqual([['1.2', '14.1']]);
    expect(pairsOf('14.1\t1.2', 'cosy')).toEqual([['14.1', '1.2']]);
  });

  it('say what was skipped', () => {
    expect(parsePairTable('proton\tproton\n1.2\t4.1\t0.83', 'cosy')).toEqual({
      cells: [{ first: '1.2', second: '4.1' }],
      notes: ['Line 1 skipped: heading', 'Line 2: cells beyond the second are not used'],
    });
  });
});
