// @ts-check
import { existsSync } from 'node:fs';
import { mkdir, readFile, rm, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';

/**
 * Waits until this process alone holds the lock file, then returns the function that gives it back. A lock whose process
 * has gone is taken over.
 * @param {string} path
 * @returns {Promise<() => Promise<void>>}
 */
export async function holdLock(path) {
  await mkdir(dirname(path), { recursive: true });
  for (;;) {
    try {
      await writeFile(path, String(process.pid), { flag: 'wx' });
      return () => rm(path, { force: true });
    } catch (error) {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
    }
    const holder = await readFile(path, 'utf8').catch(() => '');
    // Empty for the instant between creation and writing: look again.
    if (holder !== '' && !existsSync(`/proc/${holder}`)) await rm(path, { force: true });
    else await new Promise((resolve) => setTimeout(resolve, 200));
  }
}
