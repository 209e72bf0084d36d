// @ts-check
/**
 * Builds client and server into dist/, each only when its sources have changed since. Plain JavaScript without packages:
 * it runs before anything is built or installed.
 */
import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { cp, mkdir, readdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { dirname, join, relative, resolve } from 'node:path';
import { holdLock } from './lock.mjs';

const projectRoot = resolve(import.meta.dirname, '../..');

/**
 * @typedef {object} BuildPart
 * @property {string} name shown to people and used in the stamp
 * @property {readonly string[]} sources files and folders whose content decides whether the part is up to date
 * @property {readonly string[]} outputs folders below dist/ that the part writes
 * @property {(root: string) => Promise<void>} build
 */

/** @type {readonly BuildPart[]} */
const parts = [
  {
    name: 'server',
    sources: ['server', 'workers', 'shared', 'tsconfig.json', 'package-lock.json'],
    outputs: ['server', 'workers', 'shared'],
    build: buildServer,
  },
  {
    name: 'client',
    sources: ['src', 'shared', 'index.html', 'vite.config.ts', 'tsconfig.json', 'package-lock.json'],
    outputs: ['client'],
    build: buildClient,
  },
];

/**
 * Builds what is out of date.
 * @param {{ root?: string, force?: boolean, parts?: readonly BuildPart[], log?: (line: string) => void }} [options]
 * @returns {Promise<string[]>} names of the parts that were built
 */
export async function buildIfStale({ root = projectRoot, force = false, parts: wanted = parts, log = console.log } = {}) {
  const releaseLock = await holdLock(join(root, 'dist', '.build-lock'));
  try {
    const built = [];
    for (const part of wanted) {
      const fingerprint = await fingerprintOf(root, part.sources);
      const stampFile = join(root, 'dist', `.${part.name}-stamp`);
      const stamp = await readFile(stampFile, 'utf8').catch(() => null);
      if (!force && stamp === fingerprint) continue;
      log(`Building the ${part.name} …`);
      // A build that breaks off must not look finished.
      await rm(stampFile, { force: true });
      await part.build(root);
      await writeFile(stampFile, fingerprint);
      built.push(part.name);
    }
    return built;
  } finally {
    await releaseLock();
  }
}

/**
 * Hash over names and contents. Times would not do: a fresh clone, a copied folder and a changed branch all have new ones.
 * @param {string} root
 * @param {readonly string[]} sources
 */
export async function fingerprintOf(root, sources) {
  const hash = createHash('sha256');
  for (const source of sources) {
    for (const file of await filesBelow(join(root, source))) {
      hash
        .update(relative(root, file))
        .update('\0')
        .update(await readFile(file))
        .update('\0');
    }
  }
  return hash.digest('hex');
}

/**
 * @param {string} path
 * @returns {Promise<string[]>} the file itself or all files below the folder, sorted; none when it does not exist
 */
async function filesBelow(path) {
  const entries = await readdir(path, { withFileTypes: true, recursive: true }).catch((/** @type {NodeJS.ErrnoException} */ error) => {
    if (error.code === 'ENOTDIR') return null;
    if (error.code === 'ENOENT') return [];
    throw error;
  });
  if (entries === null) return [path];
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name))
    .sort();
}

/** @param {string} root */
async function buildServer(root) {
  const folders = ['server', 'workers', 'shared'];
  const fresh = join(root, 'dist', '.fresh-server');
  await rm(fresh, { recursive: true, force: true });
  await runTool(root, 'typescript/bin/tsc', ['-p', 'server/tsconfig.build.json', '--outDir', fresh]);
  for (const folder of folders) await copyDataFiles(join(root, folder), join(fresh, folder));
  for (const folder of folders) await replaceFolder(join(fresh, folder), join(root, 'dist', folder));
  await rm(fresh, { recursive: true, force: true });
}

/** @param {string} root */
async function buildClient(root) {
  const fresh = join(root, 'dist', '.fresh-client');
  await runTool(root, 'vite/bin/vite.js', ['build', '--outDir', fresh, '--emptyOutDir', '--logLevel', 'warn']);
  await replaceFolder(fresh, join(root, 'dist', 'client'));
}

/**
 * The new folder takes the place of the old one only when it is complete.
 * @param {string} fresh
 * @param {string} target
 */
async function replaceFolder(fresh, target) {
  await rm(target, { recursive: true, force: true });
  await rename(fresh, target);
}

/**
 * Tables and templates that code reads at run time stay beside that code.
 * @param {string} from
 * @param {string} to
 */
async function copyDataFiles(from, to) {
  const isCode = /\.(ts|tsx|mjs|md)$|tsconfig[^/]*\.json$/;
  for (const file of await filesBelow(from)) {
    if (isCode.test(file)) continue;
    const target = join(to, relative(from, file));
    await mkdir(dirname(target), { recursive: true });
    await cp(file, target);
  }
}

/**
 * Runs a tool by its own file: `npx` would keep the real process out of reach of a signal.
 * @param {string} root
 * @param {string} tool path below node_modules
 * @param {readonly string[]} args
 * @returns {Promise<void>}
 */
function runTool(root, tool, args) {
  return new Promise((resolvePromise, reject) => {
    // The test runner sets NODE_ENV=test, which must not get into a build.
    const env = { ...process.env, NODE_ENV: 'production' };
    const child = spawn(process.execPath, [join(root, 'node_modules', tool), ...args], {
      cwd: root,
      env,
      stdio: ['ignore', 'inherit', 'inherit'],
    });
    child.once('error', reject);
    child.once('exit', (code) => (code === 0 ? resolvePromise() : reject(new Error(`${tool} ended with code ${code}`))));
  });
}
