import { ConnectionRefusedError, DatabaseError, UniqueConstraintError } from 'sequelize';
import { describe, expect, it } from 'vitest';
import { untilDatabaseAnswers } from '../../../server/compute/database-retry.js';

/** An error as the connector raises it and Sequelize wraps it. */
const databaseError = (fields: { code?: string; fatal?: boolean }) =>
  new DatabaseError(Object.assign(new Error('from the database'), { sql: 'UPDATE', ...fields }));
const failing = (errors: Error[]) => {
  let calls = 0;
  const action = async () => {
    calls += 1;
    const error = errors.shift();
    if (error !== undefined) throw error;
    return 'written';
  };
  return { action, calls: () => calls };
};

describe('untilDatabaseAnswers', () => {
  it('repeats what a lost connection, a refused one or a lost race broke off', async () => {
    const { action, calls } = failing([
      new ConnectionRefusedError(new Error('refused')),
      databaseError({ code: 'ER_SOCKET_UNEXPECTED_CLOSE', fatal: true }),
      databaseError({ code: 'ER_LOCK_DEADLOCK' }),
    ]);
    expect(await untilDatabaseAnswers(action, () => false)).toBe('written');
    expect(calls()).toBe(4);
  });

  it('does not repeat what is wrong in itself', async () => {
    for (const error of [databaseError({ code: 'ER_DATA_TOO_LONG' }), new UniqueConstraintError({}), new TypeError('a bug')]) {
      const { action, calls } = failing([error]);
      await expect(untilDatabaseAnswers(action, () => false)).rejects.toBe(error);
      expect(calls()).toBe(1);
    }
  });

  it('gives up when the process is closing', async () => {
    const { action } = failing(Array.from({ length: 100 }, () => new ConnectionRefusedError(new Error('refused'))));
    await expect(untilDatabaseAnswers(action, () => true)).rejects.toBeInstanceOf(ConnectionRefusedError);
  });
});
