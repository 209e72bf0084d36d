import { afterAll, beforeAll, expect, it } from 'vitest';
import { migrate } from '../../../server/database/migrate.js';
import { migrations } from '../../../server/migrations/index.js';
import { createEmptyTestDatabase, type TestDatabase } from '../../support/database.js';

let database: TestDatabase;
beforeAll(async () => {
  database = await createEmptyTestDatabase();
});
afterAll(() => database.drop());

it('runs every migration once and tells which ones ran', async () => {
  expect(await migrate(database.sequelize)).toEqual(migrations.map(({ name }) => name));
  expect(await migrate(database.sequelize)).toEqual([]);
});
