import { describe, expect, it } from 'vitest';
import { formatDateTime, formatDay, formatSeconds } from '../../../src/lib/dates';

describe('moments', () => {
  it('are written day, short month, year, time', () => {
    const local = new Date(2026, 11, 3, 14, 5).toISOString();
    expect(formatDateTime(local)).toBe('3 Dec 2026, 14:05');
  });
  it('have three letters in every month', () => {
    const months = Array.from({ length: 12 }, (_, month) => formatDay(new Date(2026, month, 15).toISOString()).split(' ')[1]);
    expect(months).toEqual(['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']);
  });
  it('write midnight as 00:00', () => {
    expect(formatDateTime(new Date(2026, 0, 1, 0, 0).toISOString())).toBe('1 Jan 2026, 00:00');
  });
});

describe('spans', () => {
  it.each([
    [0, '0\u2009s'],
    [0.02, '<\u20090.1\u2009s'],
    [0.84, '0.8\u2009s'],
    [42, '42\u2009s'],
    [59.7, '1\u2009min'],
    [200, '3\u2009min 20\u2009s'],
    [3600, '1\u2009h'],
    [7500, '2\u2009h 5\u2009min'],
  ])('of %d seconds read %s', (seconds, text) => {
    expect(formatSeconds(seconds)).toBe(text);
  });
});
