import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import { DEMO_PEOPLE } from './demo-data.js';

const demoFile = z.object({
  /** False until everything is loaded: a start that was broken off is then gone on with. */
  isLoaded: z.boolean(),
  passwordByEmail: z.record(z.string(), z.string()),
});
export type DemoFile = z.infer<typeof demoFile>;

const pathOf = (dataDirectory: string): string => join(dataDirectory, 'demo-accounts.json');

/** What is known of the demo in this data folder; null when it was never loaded from here. */
export function readDemoFile(dataDirectory: string): DemoFile | null {
  const path = pathOf(dataDirectory);
  return existsSync(path) ? demoFile.parse(JSON.parse(readFileSync(path, 'utf8'))) : null;
}

/** Written aside and renamed, so that a power cut leaves the old file or the new one. */
export function writeDemoFile(dataDirectory: string, file: DemoFile): void {
  mkdirSync(dataDirectory, { recursive: true, mode: 0o700 });
  const path = pathOf(dataDirectory);
  writeFileSync(`${path}.new`, `${JSON.stringify(file, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${path}.new`, path);
}

/** Passwords for the demo accounts, made on this machine; none is in the code. */
export function createDemoPasswords(): Record<string, string> {
  return Object.fromEntries(DEMO_PEOPLE.map(({ email }) => [email, randomBytes(9).toString('base64url')]));
}
