import { afterAll, beforeAll, expect, it } from 'vitest';
import { createMigrator, migrate } from '../../../server/database/migrate.js';
import { migrations } from '../../../server/migrations/index.js';
import { createEmptyTestDatabase, type TestDatabase } from '../../support/database.js';

let database: TestDatabase;
beforeAll(async () => {
  database = await createEmptyTestDatabase();
});
afterAll(() => database.drop());

const tableCount = async () => (await database.sequelize.getQueryInterface().showAllTables()).length;

it('runs every migration once, all the way down and up again', async () => {
  const names = migrations.map(({ name }) => name);
  expect(await migrate(database.sequelize)).toEqual(names);
  expect(await migrate(database.sequelize)).toEqual([]);
  const tablesAfterFirst = await tableCount();
  expect(tablesAfterFirst).toBeGreaterThan(1);
  await createMigrator(database.sequelize).down({ to: 0 });
  expect(await tableCount()).toBe(1);
  await migrate(database.sequelize);
  expect(await tableCount()).toBe(tablesAfterFirst);
});

it('names the migrations in the order in which they run', () => {
  const names = migrations.map(({ name }) => name);
  expect(names).toEqual([...names].sort());
  for (const name of names) expect(name).toMatch(/^\d{14}-[a-z0-9-]+$/);
});
