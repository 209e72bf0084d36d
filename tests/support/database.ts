import { randomBytes } from 'node:crypto';
import type { Sequelize } from 'sequelize';
import { inject } from 'vitest';
import { connectDatabase } from '../../server/database/connect.js';
import { migrate } from '../../server/database/migrate.js';
import { initModels } from '../../server/models/init-models.js';

export interface TestDatabase {
  readonly sequelize: Sequelize;
  /** Address with the name of this database: what DATABASE_URL would hold. */
  readonly url: string;
  /** Closes the pool and drops the database. */
  readonly drop: () => Promise<void>;
}

/** A fresh, migrated database of its own with the models bound to it, for one test file. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const { sequelize, url, drop } = await createEmptyTestDatabase();
  await migrate(sequelize);
  initModels(sequelize);
  return { sequelize, url, drop };
}

/** The same without any table: for the tests of the migrations themselves. */
export async function createEmptyTestDatabase(): Promise<TestDatabase> {
  const serverUrl = inject('databaseServerUrl');
  const name = `test_${randomBytes(8).toString('hex')}`;
  const url = `${serverUrl}/${name}`;
  await onServer(serverUrl, `CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`);
  const sequelize = connectDatabase(url, { poolSize: 10 });
  return {
    sequelize,
    url,
    drop: async () => {
      await sequelize.close();
      await onServer(serverUrl, `DROP DATABASE IF EXISTS ${name}`);
    },
  };
}

async function onServer(serverUrl: string, statement: string): Promise<void> {
  const connection = connectDatabase(`${serverUrl}/mysql`, { poolSize: 1 });
  await connection.query(statement);
  await connection.close();
}
