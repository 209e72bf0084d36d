import { QueryTypes, type Model, type ModelStatic, type Sequelize } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createMigrator } from '../../../server/database/migrate.js';
import { migrations } from '../../../server/migrations/index.js';
import { initModels } from '../../../server/models/init-models.js';
import { createEmptyTestDatabase, type TestDatabase } from '../../support/database.js';

interface Column {
  readonly tableName: string;
  readonly columnName: string;
  readonly dataType: string;
  readonly columnType: string;
  readonly isNullable: 'YES' | 'NO';
  readonly characterLength: number | null;
  readonly collation: string | null;
}

const MIGRATION_TABLE = 'schema_migrations';

let database: TestDatabase;
let sequelize: Sequelize;

beforeAll(async () => {
  database = await createEmptyTestDatabase();
  ({ sequelize } = database);
  initModels(sequelize);
});
afterAll(async () => {
  await database.drop();
});

const tables = async (): Promise<string[]> =>
  (
    await sequelize.query<{ name: string }>(
      'SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE() ORDER BY table_name',
      {
        type: QueryTypes.SELECT,
      },
    )
  )
    .map(({ name }) => name)
    .filter((name) => name !== MIGRATION_TABLE)
    .sort();

const columns = async (): Promise<Column[]> =>
  await sequelize.query<Column>(
    `SELECT table_name AS tableName, column_name AS columnName, data_type AS dataType, column_type AS columnType,
            is_nullable AS isNullable, character_maximum_length AS characterLength, collation_name AS collation
       FROM information_schema.columns WHERE table_schema = DATABASE() AND table_name <> 'schema_migrations'`,
    { type: QueryTypes.SELECT },
  );

/** The runner keeps its own table through a model on the same connection. */
const models = (): Array<ModelStatic<Model>> => Object.values(sequelize.models).filter((model) => model.getTableName() !== MIGRATION_TABLE);

/** What the migrations must have made of an attribute type, as information_schema names it. */
function expectedType(type: string): string {
  // JSON is kept as LONGTEXT with a check, BOOLEAN as TINYINT(1).
  const names: Readonly<Record<string, string>> = {
    JSON: 'longtext',
    'TINYINT(1)': 'tinyint(1)',
    INTEGER: 'int',
    BIGINT: 'bigint',
    'DOUBLE PRECISION': 'double',
    TEXT: 'text',
    'DATETIME(3)': 'datetime(3)',
  };
  return names[type] ?? type.replace('CHAR(36) BINARY', 'CHAR(36)').toLowerCase();
}

describe('migrations', () => {
  it('carry unique names in the order of their dates', () => {
    const names = migrations.map(({ name }) => name);
    expect(new Set(names).size).toBe(names.length);
    expect([...names].sort()).toEqual(names);
    for (const name of names) expect(name).toMatch(/^\d{14}-[a-z-]+$/);
  });

  it('go up, down one by one to an empty database, and up again', async () => {
    const migrator = createMigrator(sequelize);
    await migrator.up();
    const before = await columns();
    expect(await tables()).not.toHaveLength(0);
    for (const { name } of [...migrations].reverse()) {
      const reverted = await migrator.down();
      expect(reverted.map((migration) => migration.name)).toEqual([name]);
    }
    expect(await tables()).toEqual([]);
    await migrator.up();
    expect(await columns()).toEqual(before);
  });

  it('make exactly the tables that the models name', async () => {
    expect(await tables()).toEqual(
      models()
        .map((model) => String(model.getTableName()))
        .sort(),
    );
  });

  it('make exactly the columns that the models declare, with their types and nullability', async () => {
    const found = await columns();
    for (const model of models()) {
      const table = String(model.getTableName());
      const actual = found
        .filter(({ tableName }) => tableName === table)
        .map(({ columnName, columnType, isNullable }) => ({
          column: columnName,
          // A fixed-length text holds the same values as a variable one of that length.
          type: columnType
            .replace(/\(\d+\) unsigned/, '')
            .replace(/^int\(\d+\)$/, 'int')
            .replace(/^bigint\(\d+\)$/, 'bigint')
            .replace(/^char\((64|7)\)$/, 'varchar($1)'),
          isNullable: isNullable === 'YES',
        }));
      const declared = Object.values(model.getAttributes()).map((attribute) => ({
        column: attribute.field,
        type: expectedType((attribute.type as { toSql(): string }).toSql()),
        isNullable: attribute.primaryKey !== true && attribute.allowNull !== false,
      }));
      const byColumn = (a: { column: string | undefined }, b: { column: string | undefined }) =>
        String(a.column).localeCompare(String(b.column));
      expect(actual.sort(byColumn), table).toEqual(declared.sort(byColumn));
    }
  });

  it('keep milliseconds in every time', async () => {
    const times = (await columns()).filter(({ dataType }) => ['datetime', 'timestamp', 'date', 'time'].includes(dataType));
    expect(times.length).toBeGreaterThan(0);
    expect(times.filter(({ columnType }) => columnType !== 'datetime(3)')).toEqual([]);
  });

  it('compare ids, hashes, SMILES and id codes byte by byte', async () => {
    const exact = (await columns()).filter(
      ({ columnName }) =>
        columnName === 'id' ||
        columnName.endsWith('_id') ||
        columnName.endsWith('_hash') ||
        ['smiles', 'idcode', 'formula', 'email'].includes(columnName),
    );
    expect(exact.length).toBeGreaterThan(50);
    expect(exact.filter(({ collation }) => collation === null || !collation.endsWith('_bin'))).toEqual([]);
  });

  it('give every table of a team its team, bound by a foreign key', async () => {
    const installationTables = ['users', 'teams', 'sessions', 'sign_in_attempts', 'password_resets', 'mail_outbox'];
    const bound = await sequelize.query<{ name: string }>(
      `SELECT table_name AS name FROM information_schema.key_column_usage
        WHERE table_schema = DATABASE() AND column_name = 'team_id' AND referenced_table_name = 'teams' ORDER BY table_name`,
      { type: QueryTypes.SELECT },
    );
    expect(bound.map(({ name }) => name).sort()).toEqual((await tables()).filter((name) => !installationTables.includes(name)));
  });

  it('bind every reference by a foreign key and give each an index and a name of ours', async () => {
    const references = (await columns()).filter(
      ({ columnName, tableName }) => columnName.endsWith('_id') && !(tableName === 'audit_events' && columnName === 'subject_id'),
    );
    const keys = await sequelize.query<{ tableName: string; columnName: string; keyName: string }>(
      `SELECT table_name AS tableName, column_name AS columnName, constraint_name AS keyName FROM information_schema.key_column_usage
        WHERE table_schema = DATABASE() AND referenced_table_name IS NOT NULL`,
      { type: QueryTypes.SELECT },
    );
    const indexes = await sequelize.query<{ tableName: string; columnName: string; indexName: string }>(
      `SELECT table_name AS tableName, column_name AS columnName, index_name AS indexName FROM information_schema.statistics
        WHERE table_schema = DATABASE() AND seq_in_index = 1`,
      { type: QueryTypes.SELECT },
    );
    for (const { tableName, columnName } of references) {
      const where = `${tableName}.${columnName}`;
      expect(keys.find((key) => key.tableName === tableName && key.columnName === columnName)?.keyName, where).toMatch(
        new RegExp(`^${tableName}_.*_fk$`),
      );
      // An index that MariaDB added by itself would carry the name of the foreign key.
      const index = indexes.find((candidate) => candidate.tableName === tableName && candidate.columnName === columnName)?.indexName;
      expect(index, where).toMatch(/_(idx|key)$/);
    }
  });
});
