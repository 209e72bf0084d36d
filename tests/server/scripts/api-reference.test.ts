import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { z } from 'zod';
import { renderApiReference } from '../../../server/scripts/api-reference.js';
import { apiReference } from '../../../server/scripts/api-reference-source.js';

it('is current: run `npm run api-docs` after a change of the schemas', () => {
  expect(readFileSync(new URL('../../../server/routes/API.md', import.meta.url), 'utf8')).toBe(apiReference());
});

it('shows optional fields, limits, null and references to other schemas', () => {
  const colour = z.enum(['red', 'blue']);
  const paintRequest = z.object({ colour, coats: z.number().int().min(1).max(5).default(2), note: z.string().max(80).nullable() });
  const text = renderApiReference({
    endpoints: { paint: { method: 'POST', path: '/walls/:wallId', summary: 'Paint a wall.', body: paintRequest } },
    schemas: { colour, paintRequest },
  });
  expect(text).toContain('| paint | POST | `/walls/:wallId` | Paint a wall. | – | [paintRequest](#paintrequest) | – |');
  expect(text).toContain(
    '  colour: colour;\n  coats?: number; // whole number, 1 to 5, default 2\n  note: string | null; // at most 80 characters\n',
  );
  expect(text).toContain('### colour\n\n```ts\n"red" | "blue"\n```');
});

it('refuses a schema that has no name', () => {
  const endpoints = { paint: { method: 'POST', path: '/walls', summary: 'Paint.', body: z.object({}) } } as const;
  expect(() => renderApiReference({ endpoints, schemas: {} })).toThrow('does not export');
});
