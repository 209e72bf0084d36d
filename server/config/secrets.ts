import { randomBytes } from 'node:crypto';
import { chmodSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';

const secretsSchema = z.object({
  /** Signs session tokens. Changing it signs everybody out. */
  tokenKey: z.string().min(43),
});
export type Secrets = z.infer<typeof secretsSchema>;

export function createSecrets(): Secrets {
  return { tokenKey: randomBytes(48).toString('base64url') };
}

/**
 * Reads the secrets of this installation; the first start makes them. The file is readable by its owner only.
 * @throws Error when the file is there but damaged: making new secrets silently would sign everybody out.
 */
export function loadSecrets(dataDirectory: string): Secrets {
  mkdirSync(dataDirectory, { recursive: true, mode: 0o700 });
  const file = join(dataDirectory, 'secrets.json');
  try {
    // Fails when the file exists, so that two processes starting at once end up with the same secrets.
    writeFileSync(file, JSON.stringify(createSecrets()), { flag: 'wx', mode: 0o600 });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  }
  chmodSync(file, 0o600);
  const parsed = secretsSchema.safeParse(parseJson(readFileSync(file, 'utf8')));
  if (!parsed.success) throw new Error(`${file} is damaged. Restore it, or remove it to sign everybody out and start with new secrets.`);
  return parsed.data;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
