import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { InvalidInputError } from '../../../server/errors.js';
import { parseRequest, tryParse } from '../../../server/routes/parse-input.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';

const issuesOf = (schema: z.ZodType, input: unknown) => {
  const result = tryParse(schema, input);
  return result.ok ? [] : result.issues;
};

describe('parsing input', () => {
  it('reports every issue with a path as the design shows it', () => {
    const issues = issuesOf(evidenceDocument, {
      formula: 'C9H10O2',
      carbonSignals: [{ shift: 166.9 }, { shift: 'low' }, { shift: 400, hydrogens: 5 }],
      colour: 'red',
    });
    expect(issues).toEqual([
      { path: 'carbonSignals[1].shift', message: 'expected a number between -50 and 300 ppm' },
      { path: 'carbonSignals[2].shift', message: 'expected a number between -50 and 300 ppm' },
      { path: 'carbonSignals[2].hydrogens', message: 'expected a whole number between 0 and 3' },
      { path: 'colour', message: 'is not a known field' },
    ]);
  });

  it('says in plain words what a field should be when the schema has none of its own', () => {
    const schema = z.object({
      text: z.string(),
      count: z.number().int(),
      flag: z.boolean(),
      list: z.array(z.string()),
      id: z.uuid(),
      choice: z.enum(['a', 'b']),
      union: z.union([z.enum(['new', 'old']), z.literal('all')]),
      short: z.string().max(3),
      few: z.array(z.string()).min(2),
    });
    expect(
      issuesOf(schema, { count: 1.5, flag: 'yes', list: 'x', id: 'x', choice: 'c', union: 'none', short: 'long', few: ['x'] }),
    ).toEqual([
      { path: 'text', message: 'expected a text' },
      { path: 'count', message: 'expected a whole number' },
      { path: 'flag', message: 'expected true or false' },
      { path: 'list', message: 'expected a list' },
      { path: 'id', message: 'expected an id' },
      { path: 'choice', message: 'expected one of: a, b' },
      { path: 'union', message: 'expected one of: new, old, all' },
      { path: 'short', message: 'expected at most 3 characters' },
      { path: 'few', message: 'expected at least 2 entries' },
    ]);
  });

  it('reports issues of parameters, query and body together', () => {
    const schemas = {
      params: z.object({ id: z.uuid() }),
      query: z.object({ page: z.coerce.number().min(1) }),
      body: z.object({ name: z.string() }),
    };
    try {
      parseRequest(schemas, { params: { id: '1' }, query: { page: '0' }, body: undefined });
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(InvalidInputError);
      expect((error as InvalidInputError).issues.map(({ path }) => path)).toEqual(['id', 'page', 'name']);
    }
  });
});
