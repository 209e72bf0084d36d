import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatCount, formatProbability, formatSigned, parseNumberText } from '../../../src/lib/numbers';

describe('counts', () => {
  // Thin spaces in groups of three, four-digit numbers unbroken: SI Brochure, 9th ed., section 5.4.4.
  it.each([
    [0, '0'],
    [9999, '9999'],
    [10000, '10\u2009000'],
    [369067, '369\u2009067'],
    [1234567890, '1\u2009234\u2009567\u2009890'],
  ])('writes %d with thin spaces', (value, text) => {
    expect(formatCount(value)).toBe(text);
  });
});

describe('probabilities', () => {
  it('never says that something is certain', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1, noNaN: true }), (value) => {
        expect(formatProbability(value)).not.toMatch(/^100/);
      }),
    );
  });
  it('tells small from none', () => {
    expect(formatProbability(0)).toBe('0\u2009%');
    expect(formatProbability(0.0002)).toBe('<\u20090.1\u2009%');
    expect(formatProbability(0.374)).toBe('37\u2009%');
  });
});

describe('signed numbers', () => {
  it('uses a real minus sign and none for zero', () => {
    expect(formatSigned(-1.25, 1)).toBe('\u22121.3');
    expect(formatSigned(0.42, 2)).toBe('+0.42');
    expect(formatSigned(-0.001, 1)).toBe('0.0');
  });
});

describe('text of a number field', () => {
  it('reads every number that a table can print', () => {
    fc.assert(
      fc.property(fc.double({ min: -5000, max: 5000, noNaN: true }), fc.integer({ min: 0, max: 4 }), (value, digits) => {
        const text = value.toFixed(digits);
        expect(parseNumberText(text)).toEqual({ kind: 'number', value: Number(text) });
      }),
    );
  });
  it('understands a decimal comma, blanks and a typographic minus', () => {
    expect(parseNumberText(' 7,21 ')).toEqual({ kind: 'number', value: 7.21 });
    expect(parseNumberText('\u22120.5')).toEqual({ kind: 'number', value: -0.5 });
  });
  it.each(['7.2.1', 'abc', '1e5', '12 34', '-', '0x10', 'Infinity'])('refuses %s instead of guessing', (text) => {
    expect(parseNumberText(text)).toEqual({ kind: 'notNumber' });
  });
  it('tells empty from wrong', () => {
    expect(parseNumberText('  ')).toEqual({ kind: 'empty' });
  });
});
