import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { gunzipSync } from 'node:zlib';
import { parseSmiles } from '../../../shared/chemistry/smiles.js';

/**
 * Reads every n-th line of a gzipped JSON-lines file of the reference data beside the checkout; null, with one line that
 * says so, where it is absent. Records whose structure the product refuses (salts, zwitterions) are left out.
 */
export function readOutsideLines<T extends { truth?: string; smiles?: string }>(path: string, every: number): T[] | null {
  const file = fileURLToPath(new URL(`../../../../shared/${path}`, import.meta.url));
  if (!existsSync(file)) {
    console.info(`skipped: reference data ${path} is not beside this checkout`);
    return null;
  }
  return gunzipSync(readFileSync(file))
    .toString('utf8')
    .trim()
    .split('\n')
    .filter((_, line) => line % every < 2)
    .map((line) => JSON.parse(line) as T)
    .filter(({ truth, smiles }) => parseSmiles(truth ?? smiles ?? '').ok);
}
