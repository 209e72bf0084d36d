import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** Folder beside the checkout with reference data that is not part of the project; absent on most machines. */
const outside = new URL('../../../shared/', import.meta.url);

/** Reads a JSON file from the reference data, or null (with one line that says so) where it is absent. */
export function readOutside<T>(path: string): T | null {
  const file = fileURLToPath(new URL(path, outside));
  if (!existsSync(file)) {
    console.info(`skipped: reference data ${path} is not beside this checkout`);
    return null;
  }
  return JSON.parse(readFileSync(file, 'utf8')) as T;
}
