import { describe, expect, it } from 'vitest';
import { atomNumbersText, carbonCountText, protonCountText, shiftText } from '../../../../src/components/plots/signal-text.js';

describe('shifts in words', () => {
  it('have one decimal for 13C and two for 1H, with a real minus sign', () => {
    expect(shiftText(166.94, '13C')).toBe('166.9');
    expect(shiftText(7.256, '1H')).toBe('7.26');
    expect(shiftText(-0.02, '1H')).toBe('−0.02');
  });

  it('do not write a negative zero', () => {
    expect(shiftText(-0.001, '1H')).toBe('0.00');
  });
});

describe('what is under a signal', () => {
  it('names the carbon type and counts only where there are several or the type is not known', () => {
    expect(carbonCountText(1, 'CH₂')).toBe('CH₂');
    expect(carbonCountText(2, 'CH')).toBe('2\u2009×\u2009CH');
    expect(carbonCountText(2, '')).toBe('2\u2009C');
    expect(carbonCountText(null, '')).toBe('');
  });

  it('gives hydrogens before their multiplicity', () => {
    expect(protonCountText(3, 't')).toBe('3\u2009H, t');
    expect(protonCountText(null, 'm')).toBe('m');
    expect(protonCountText(1, '')).toBe('1\u2009H');
  });
});

describe('atom numbers', () => {
  it('count from 1 and join runs of three or more', () => {
    expect(atomNumbersText([6, 10])).toBe('7, 11');
    expect(atomNumbersText([4, 2, 3, 9])).toBe('3–5, 10');
    expect(atomNumbersText([0, 1])).toBe('1, 2');
    expect(atomNumbersText([])).toBe('');
  });

  it('name an atom once that carries two predicted signals', () => {
    expect(atomNumbersText([3, 3])).toBe('4');
  });
});
