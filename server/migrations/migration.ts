import type { QueryInterface } from 'sequelize';

/** One schema change. MariaDB commits each DDL statement at once, so `up` and `down` hold a single statement each. */
export interface Migration {
  readonly name: string;
  up(parameters: { context: QueryInterface }): Promise<void>;
  down(parameters: { context: QueryInterface }): Promise<void>;
}

/** A migration of two plain SQL statements. */
export function sqlMigration(name: string, up: string, down: string): Migration {
  return {
    name,
    async up({ context }) {
      await context.sequelize.query(up);
    },
    async down({ context }) {
      await context.sequelize.query(down);
    },
  };
}

/** A migration that creates one table; `definition` is what stands between the brackets. */
export function tableMigration(name: string, table: string, definition: string): Migration {
  return sqlMigration(
    name,
    `CREATE TABLE ${table} (${definition}) ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci`,
    `DROP TABLE ${table}`,
  );
}

/** Ids are UUIDs in lower case: one byte a letter and compared byte by byte. */
export const ID = 'CHAR(36) CHARACTER SET ascii COLLATE ascii_bin';
/** SHA-256 in hexadecimal. */
export const HASH = 'CHAR(64) CHARACTER SET ascii COLLATE ascii_bin';
/** Words from a fixed list of ours (roles, states, kinds). */
export const WORD = 'VARCHAR(24) CHARACTER SET ascii COLLATE ascii_bin';
/** Text in which upper and lower case differ: SMILES, id codes, formulas, e-mail addresses. */
export const exactText = (length: number): string => `VARCHAR(${length}) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin`;
