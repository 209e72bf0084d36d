import { BaseError, ConnectionError, DatabaseError } from 'sequelize';

const FIRST_PAUSE_MS = 100;
const LONGEST_PAUSE_MS = 5_000;
const LOST_RACE = new Set(['ER_LOCK_DEADLOCK', 'ER_LOCK_WAIT_TIMEOUT']);

/**
 * Repeats a database action until it gets through: a database that is being restarted must not cost a finished
 * shard. Only lost connections and lost races are repeated; everything else is a bug and is thrown.
 *
 * @param action - one transaction or one statement that may be repeated
 * @param isClosing - asked before each repetition; when true the last error is thrown
 */
export async function untilDatabaseAnswers<T>(action: () => Promise<T>, isClosing: () => boolean): Promise<T> {
  for (let pauseMs = FIRST_PAUSE_MS; ; pauseMs = Math.min(pauseMs * 2, LONGEST_PAUSE_MS)) {
    try {
      return await action();
    } catch (error) {
      if (!isPassing(error) || isClosing()) throw error;
      await new Promise((resolve) => setTimeout(resolve, pauseMs));
    }
  }
}

function isPassing(error: unknown): boolean {
  if (error instanceof ConnectionError) return true;
  if (!(error instanceof DatabaseError)) return error instanceof BaseError && error.name === 'SequelizeConnectionAcquireTimeoutError';
  // The connector marks errors that cost the connection as fatal.
  const { code, fatal } = error.parent as Error & { code?: string; fatal?: boolean };
  return fatal === true || (code !== undefined && LOST_RACE.has(code));
}
