import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { arePackagesCurrent } from '../../../server/scripts/node-packages.mjs';
import { createTemporaryFolder } from '../../support/config.js';

let root: string;
beforeEach(() => {
  root = createTemporaryFolder();
  mkdirSync(join(root, 'node_modules'));
});
afterEach(() => rmSync(root, { recursive: true, force: true }));

const write = (file: string, packages: object) => writeFileSync(join(root, file), JSON.stringify({ packages }));
const locked = {
  '': { version: '1.0.0' },
  'node_modules/a': { version: '2.0.0' },
  'node_modules/for-windows': { version: '1.0.0', optional: true },
};

it('wants packages installed when there are none', async () => {
  write('package-lock.json', locked);
  expect(await arePackagesCurrent(root)).toBe(false);
});

it('is content when all are there but those for other machines or for nobody', async () => {
  write('package-lock.json', { ...locked, 'node_modules/left-over': { version: '1.0.0', extraneous: true } });
  write('node_modules/.package-lock.json', { 'node_modules/a': { version: '2.0.0' } });
  expect(await arePackagesCurrent(root)).toBe(true);
});

it('notices another version and a package that is missing', async () => {
  write('package-lock.json', locked);
  write('node_modules/.package-lock.json', { 'node_modules/a': { version: '1.9.9' } });
  expect(await arePackagesCurrent(root)).toBe(false);
  write('node_modules/.package-lock.json', {});
  expect(await arePackagesCurrent(root)).toBe(false);
});

it('says so when the lock file itself is missing', async () => {
  await expect(arePackagesCurrent(root)).rejects.toThrow('package-lock.json is missing');
});
