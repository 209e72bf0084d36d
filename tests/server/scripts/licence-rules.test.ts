import { describe, expect, it } from 'vitest';
import { findLicenceProblems } from '../../../server/scripts/licence-rules.mjs';

const problemsOf = (licence: string | null, isShipped = true, name = 'some-package') => findLicenceProblems([{ name, licence, isShipped }]);

describe('licences of shipped packages', () => {
  it.each(['MIT', 'ISC', 'Apache-2.0', 'OFL-1.1', '(MIT OR GPL-3.0-or-later)', '(MIT AND Zlib)'])('accepts %s', (licence) => {
    expect(problemsOf(licence)).toEqual([]);
  });
  it.each([
    'GPL-3.0-only',
    'AGPL-3.0',
    'LGPL-3.0',
    'SSPL-1.0',
    'BUSL-1.1',
    'CC-BY-NC-SA-4.0',
    'UNLICENSED',
    'MIT AND GPL-2.0',
    'SEE LICENSE IN LICENSE',
    null,
  ])('refuses %s', (licence) => {
    expect(problemsOf(licence)).toHaveLength(1);
  });
  it('accepts the LGPL of the database connector, and of nothing else', () => {
    expect(problemsOf('LGPL-2.1-or-later', true, 'mariadb')).toEqual([]);
    expect(problemsOf('GPL-2.0', true, 'mariadb')).toHaveLength(1);
    expect(problemsOf('LGPL-2.1-or-later')).toHaveLength(1);
  });
});

describe('licences of tools', () => {
  it('accepts weak copyleft and refuses what forbids commerce or reaches further', () => {
    expect(problemsOf('MPL-2.0', false)).toEqual([]);
    expect(problemsOf('CC-BY-NC-4.0', false)).toHaveLength(1);
    expect(problemsOf('AGPL-3.0-only', false)).toHaveLength(1);
    expect(problemsOf('GPL-2.0', false)).toHaveLength(1);
  });
});
