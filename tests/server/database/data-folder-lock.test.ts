import { readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { DataFolderInUse, lockDataFolder } from '../../../server/database/data-folder-lock.js';
import { createTemporaryFolder } from '../../support/config.js';

let folder: string;
beforeEach(() => {
  folder = createTemporaryFolder();
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

it('lets one server have a data folder, and the next when it is given back', async () => {
  const release = await lockDataFolder(folder);
  await expect(lockDataFolder(folder)).rejects.toThrow(DataFolderInUse);
  await expect(lockDataFolder(folder)).rejects.toThrow(`process ${process.pid}`);
  await release();
  await (
    await lockDataFolder(folder)
  )();
});

it('takes over the lock of a server that crashed', async () => {
  writeFileSync(join(folder, 'server.lock'), '4194305 1234');
  const release = await lockDataFolder(folder);
  expect(readFileSync(join(folder, 'server.lock'), 'utf8')).toMatch(new RegExp(`^${process.pid} \\d+$`));
  await release();
});

it('is not fooled by a number that was given to another process since', async () => {
  writeFileSync(join(folder, 'server.lock'), `${process.pid} 1`);
  await expect(lockDataFolder(folder)).resolves.toBeTypeOf('function');
});
