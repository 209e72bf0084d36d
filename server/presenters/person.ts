import type { z } from 'zod';
import type { personName } from '../../shared/schemas/common.js';
import type { User } from '../models/user.js';

/** Name of a person beside what they did. The query must have included the person. */
export function presentPerson(user: User | undefined): z.input<typeof personName> {
  if (user === undefined) throw new Error('The person was not loaded with the row.');
  return { id: user.id, name: user.name };
}
