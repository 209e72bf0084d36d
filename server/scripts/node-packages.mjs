// @ts-check
import { readFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { run } from './run-command.mjs';

const projectRoot = resolve(import.meta.dirname, '../..');

/**
 * Installs the npm packages when those in node_modules are not the ones of the lock file.
 * @param {string} [root]
 */
export async function ensureNodePackages(root = projectRoot) {
  if (await arePackagesCurrent(root)) return;
  console.log('Installing npm packages …');
  // Build tools are development packages: NODE_ENV=production would leave them out.
  const code = await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund'], { cwd: root });
  if (code !== 0) throw new Error('npm ci failed: see its message above. It needs a connection to the npm registry.');
}

/**
 * Compares what npm noted in node_modules with the lock file. Times of files would not do: a checkout sets them anew.
 * @param {string} root
 * @returns {Promise<boolean>}
 */
export async function arePackagesCurrent(root) {
  const wanted = await readLock(join(root, 'package-lock.json'));
  const installed = await readLock(join(root, 'node_modules', '.package-lock.json'));
  if (wanted === null) throw new Error('package-lock.json is missing: this is not a complete checkout.');
  if (installed === null) return false;
  return Object.entries(wanted).every(([path, { version, optional, devOptional, peer, extraneous }]) => {
    // npm notes packages in the lock file that nobody asks for any more, and then does not install them.
    if (path === '' || extraneous === true) return true;
    const present = installed[path];
    // Packages for other machines are in the lock file but not on this one.
    if (present === undefined) return optional === true || devOptional === true || peer === true;
    return present.version === version;
  });
}

/**
 * @param {string} file
 * @returns {Promise<Record<string, { version?: string, optional?: boolean, devOptional?: boolean, peer?: boolean, extraneous?: boolean }> | null>}
 */
async function readLock(file) {
  const text = await readFile(file, 'utf8').catch(() => null);
  return text === null ? null : JSON.parse(text).packages;
}
