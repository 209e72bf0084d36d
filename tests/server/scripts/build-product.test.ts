import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { buildIfStale, fingerprintOf } from '../../../server/scripts/build-product.mjs';
import { createTemporaryFolder } from '../../support/config.js';

let root: string;
let builds: string[];
beforeEach(() => {
  root = createTemporaryFolder();
  mkdirSync(join(root, 'one', 'deep'), { recursive: true });
  writeFileSync(join(root, 'one', 'deep', 'a.ts'), 'a');
  writeFileSync(join(root, 'two.json'), 'b');
  builds = [];
});
afterEach(() => rmSync(root, { recursive: true, force: true }));

const part = (name: string, sources: string[], build = async () => void builds.push(name)) => ({ name, sources, outputs: [name], build });
const parts = () => [part('first', ['one']), part('second', ['two.json', 'absent'])];
const build = (options = {}) => buildIfStale({ root, parts: parts(), log: () => undefined, ...options });

describe('building the product', () => {
  it('builds everything once and nothing the second time', async () => {
    expect(await build()).toEqual(['first', 'second']);
    expect(await build()).toEqual([]);
    expect(builds).toEqual(['first', 'second']);
  });

  it('builds again only the part whose sources have changed', async () => {
    await build();
    writeFileSync(join(root, 'one', 'deep', 'new.ts'), '');
    expect(await build()).toEqual(['first']);
    writeFileSync(join(root, 'two.json'), 'c');
    expect(await build()).toEqual(['second']);
  });

  it('builds again when asked to', async () => {
    await build();
    expect(await build({ force: true })).toEqual(['first', 'second']);
  });

  it('does not take a build that broke off for a finished one', async () => {
    await build();
    const failing = [part('first', ['one'], () => Promise.reject(new Error('no space left')))];
    await expect(build({ parts: failing, force: true })).rejects.toThrow('no space left');
    expect(await build()).toEqual(['first']);
  });

  it('takes over the lock of a process that has gone', async () => {
    mkdirSync(join(root, 'dist'), { recursive: true });
    // Larger than any process number of Linux (at most 4194304).
    writeFileSync(join(root, 'dist', '.build-lock'), '4194305');
    expect(await build()).toEqual(['first', 'second']);
  });
});

describe('the fingerprint', () => {
  it('depends on names and contents, not on times', async () => {
    const before = await fingerprintOf(root, ['one']);
    writeFileSync(join(root, 'one', 'deep', 'a.ts'), readFileSync(join(root, 'one', 'deep', 'a.ts')));
    expect(await fingerprintOf(root, ['one'])).toBe(before);
    mkdirSync(join(root, 'one', 'other'));
    writeFileSync(join(root, 'one', 'other', 'a.ts'), 'a');
    rmSync(join(root, 'one', 'deep'), { recursive: true });
    expect(await fingerprintOf(root, ['one'])).not.toBe(before);
  });
});
