import { existsSync, mkdirSync, readFileSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { QueryTypes } from 'sequelize';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { connectDatabase } from '../../../server/database/connect.js';
import { startMariadb } from '../../../server/database/mariadb-process.js';
import { type PrivateMariadb, startPrivateMariadb } from '../../../server/database/private-mariadb.js';
import { createTemporaryFolder } from '../../support/config.js';
import { copyPreparedData } from '../../support/test-mariadb.js';

let folder: string;
let running: PrivateMariadb | null = null;
beforeEach(async () => {
  folder = createTemporaryFolder();
  mkdirSync(join(folder, 'mariadb'));
  await copyPreparedData(join(folder, 'mariadb'));
});
afterEach(async () => {
  await running?.stop();
  running = null;
  rmSync(folder, { recursive: true, force: true });
});

async function query(url: string, statement: string): Promise<object[]> {
  const sequelize = connectDatabase(url, { poolSize: 1 });
  try {
    if (statement.startsWith('SELECT')) return await sequelize.query(statement, { type: QueryTypes.SELECT });
    await sequelize.query(statement);
    return [];
  } finally {
    await sequelize.close();
  }
}

describe('the private database', () => {
  it('keeps data, address and password from one start to the next', async () => {
    running = await startPrivateMariadb(folder);
    const { url } = running;
    await query(url, 'CREATE TABLE kept (value INT)');
    await query(url, 'INSERT INTO kept VALUES (7)');
    await running.stop();
    running = await startPrivateMariadb(folder);
    expect(running.url).toBe(url);
    expect(await query(url, 'SELECT value FROM kept')).toEqual([{ value: 7 }]);
  });

  it('writes times as UTC and text as utf8mb4', async () => {
    running = await startPrivateMariadb(folder);
    const rows = await query(
      running.url,
      'SELECT @@global.time_zone AS zone, @@character_set_database AS charset, @@bind_address AS address',
    );
    expect(rows).toEqual([{ zone: '+00:00', charset: 'utf8mb4', address: '127.0.0.1' }]);
  });

  it('lets nobody in without the password, which only the owner of the folder can read', async () => {
    running = await startPrivateMariadb(folder);
    const { url } = running;
    const address = new URL(url);
    const file = join(folder, 'mariadb', 'connection.json');
    expect(readFileSync(file, 'utf8')).toContain(address.password);
    expect(statSync(file).mode & 0o777).toBe(0o600);
    expect(existsSync(join(folder, 'mariadb', 'init.sql'))).toBe(false);
    for (const account of ['root', 'isoloom:wrong', 'isoloom', 'nobody']) {
      await expect(query(`mariadb://${account}@${address.host}/isoloom`, 'SELECT 1')).rejects.toThrow(/denied|not allowed/i);
    }
  });

  it('stops a server that a killed process left behind, and loses nothing', async () => {
    const directory = join(folder, 'mariadb');
    running = await startPrivateMariadb(folder);
    const { url } = running;
    await query(url, 'CREATE TABLE kept (value INT)');
    const left = Number(readFileSync(join(directory, 'm.pid'), 'utf8'));
    running = await startPrivateMariadb(folder);
    expect(existsSync(`/proc/${left}/exe`)).toBe(false);
    expect(await query(running.url, 'SELECT * FROM kept')).toEqual([]);
  });

  it('moves to another port when a stranger has taken its own', async () => {
    running = await startPrivateMariadb(folder);
    const taken = new URL(running.url).port;
    await running.stop();
    const other = createTemporaryFolder();
    await copyPreparedData(other);
    const stranger = await startMariadb({ directory: other, port: Number(taken), initStatements: [], durable: false });
    try {
      running = await startPrivateMariadb(folder);
      expect(new URL(running.url).port).not.toBe(taken);
      expect(await query(running.url, 'SELECT 1 AS one')).toEqual([{ one: 1 }]);
    } finally {
      await stranger.stop();
      rmSync(other, { recursive: true, force: true });
    }
  });
});
