import { describe, expect, it } from 'vitest';
import { namePattern } from '../../../workers/prediction/multiplicity.js';

// Rules of SCIENCE.md 3.4 (common practice): n + 1 lines a set, sets within about 1 Hz merge, letters by falling J.
describe('pattern names', () => {
  it.each([
    [[], 's'],
    [[[7, 1]], 'd'],
    [[[7, 2]], 't'],
    [[[7, 3]], 'q'],
    [[[7, 4]], 'quint'],
    [[[7, 5]], 'sext'],
    [[[6.9, 6]], 'sept'],
    [
      [
        [6.7, 6],
        [6.6, 2],
      ],
      'non',
    ],
    // Middle of a propyl chain: an apparent sextet.
    [
      [
        [7.4, 3],
        [7, 2],
      ],
      'sext',
    ],
    [
      [
        [16, 1],
        [7.7, 1],
      ],
      'dd',
    ],
    [
      [
        [17, 1],
        [10, 1],
        [6.5, 2],
      ],
      'ddt',
    ],
    [
      [
        [2, 1],
        [8, 2],
      ],
      'td',
    ],
    [
      [
        [17, 1],
        [10, 1],
        [6.5, 1],
      ],
      'ddd',
    ],
    // Below routine resolution.
    [
      [
        [8, 1],
        [0.6, 1],
      ],
      'd',
    ],
    [[[7, 9]], 'm'],
    [
      [
        [13, 1],
        [7, 4],
      ],
      'm',
    ],
    [
      [
        [16, 1],
        [12, 1],
        [8, 1],
        [4, 1],
      ],
      'm',
    ],
    [
      [
        [16, 2],
        [12, 2],
        [8, 1],
      ],
      'm',
    ],
  ] as const)('%j gives %s', (partners, name) => {
    expect(namePattern(partners.map(([coupling, count]) => ({ coupling, count }))).multiplicity).toBe(name);
  });

  it('gives one J a letter, falling', () => {
    expect(
      namePattern([
        { coupling: 7.7, count: 1 },
        { coupling: 16, count: 1 },
      ]).couplings,
    ).toEqual([16, 7.7]);
    expect(
      namePattern([
        { coupling: 7, count: 3 },
        { coupling: 7.5, count: 1 },
      ]).couplings,
    ).toHaveLength(1);
  });

  it('does not depend on the order of the partners', () => {
    const partners = [
      { coupling: 8, count: 1 },
      { coupling: 2, count: 1 },
      { coupling: 7.4, count: 2 },
    ];
    expect(namePattern([...partners].reverse())).toEqual(namePattern(partners));
  });
});
