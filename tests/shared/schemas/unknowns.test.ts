import { describe, expect, it } from 'vitest';
import { unknownCreateRequest, unknownUpdateRequest } from '../../../shared/schemas/unknowns.js';

describe('changing an unknown', () => {
  it.each([{ status: 'shelved' }, { title: 'Renamed' }, {}])('leaves out what was not sent: %o', (change) => {
    expect(unknownUpdateRequest.parse(change)).toEqual(change);
  });
});

describe('creating an unknown', () => {
  it('needs a title and fills in the rest', () => {
    expect(unknownCreateRequest.parse({ title: ' Yellow band ' })).toEqual({ title: 'Yellow band', description: '', purpose: 'research' });
    expect(unknownCreateRequest.safeParse({ title: '   ' }).error?.issues[0]?.message).toBe('expected a title');
  });
});
