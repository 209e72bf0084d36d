// @ts-check
/** `npm run licences`: fails on a package whose licence would not let the product be shipped. */
import { readFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { findLicenceProblems } from './licence-rules.mjs';

const root = resolve(import.meta.dirname, '../..');
/** @type {Record<string, import('./licence-rules.mjs').LockedPackage>} */
const locked = JSON.parse(await readFile(join(root, 'package-lock.json'), 'utf8')).packages;
const packages = [];
for (const [path, entry] of Object.entries(locked)) {
  if (path === '') continue;
  // What a package says of itself counts; packages for other machines are not there, the lock file speaks for them.
  const text = await readFile(join(root, path, 'package.json'), 'utf8').catch(() => null);
  const manifest = text === null ? {} : JSON.parse(text);
  packages.push({
    name: path.slice(path.lastIndexOf('node_modules/') + 'node_modules/'.length),
    licence: manifest.license?.type ?? manifest.license ?? entry.license ?? null,
    isShipped: entry.dev !== true,
  });
}
const problems = findLicenceProblems(packages);
for (const problem of problems) console.error(problem);
if (problems.length > 0) process.exit(1);
console.log(`Licences of ${packages.length} packages checked.`);
