import { z } from 'zod';

export const id = z.uuid();
export const timestamp = z.iso.datetime();
export const pageQuery = z.object({
  page: z.coerce.number().int().min(1).max(100_000).default(1),
  pageSize: z.coerce.number().int().min(1).max(200).default(50),
});
/** A page of rows with the total, so that a table can show "51–100 of 212". */
export const pageOf = <T extends z.ZodType>(row: T) =>
  z.object({ rows: z.array(row), total: z.number().int(), page: z.number().int(), pageSize: z.number().int() });
/** Abilities of the caller on one row: action → allowed. The client hides what is false and holds no rules. */
export const abilities = <const A extends readonly [string, ...string[]]>(actions: A) =>
  z.object(Object.fromEntries(actions.map((action) => [action, z.boolean()])) as { [K in A[number]]: z.ZodBoolean });
export const personName = z.object({ id, name: z.string() });
export const emailAddress = z
  .email({ error: 'expected an e-mail address' })
  .max(254)
  .transform((text) => text.toLowerCase());
/** bcrypt reads 72 bytes only: longer passwords are refused, not cut. */
export const newPassword = z
  .string()
  .min(10, { error: 'expected at least 10 characters' })
  .refine((text) => new TextEncoder().encode(text).length <= 72, { error: 'expected at most 72 bytes' });
