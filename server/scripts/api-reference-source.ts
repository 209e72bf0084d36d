import { z } from 'zod';
import * as common from '../../shared/schemas/common.js';
import { endpoints } from '../../shared/schemas/endpoints.js';
import * as evidence from '../../shared/schemas/evidence.js';
import * as people from '../../shared/schemas/people.js';
import * as runs from '../../shared/schemas/runs.js';
import * as unknowns from '../../shared/schemas/unknowns.js';
import { renderApiReference } from './api-reference.js';

/** Small schemas that read better where they are used than behind a name. */
const inlined = new Set(['id', 'timestamp', 'emailAddress', 'newPassword']);

/** The API reference of this product, as it belongs into server/routes/API.md. */
export function apiReference(): string {
  const schemas: Record<string, z.ZodType> = {};
  for (const exported of [common, evidence, people, unknowns, runs]) {
    for (const [name, value] of Object.entries(exported)) {
      if (value instanceof z.ZodType && !inlined.has(name)) schemas[name] = value;
    }
  }
  return renderApiReference({ endpoints, schemas });
}
