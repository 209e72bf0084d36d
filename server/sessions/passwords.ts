import bcrypt from 'bcryptjs';
import type { Config } from '../config/config.js';

/** log2 of the rounds. Tests hash many passwords and guard nothing. */
const costOf = (config: Config): number => (config.nodeEnv === 'test' ? 10 : 12);

export async function hashPassword(config: Config, password: string): Promise<string> {
  return await bcrypt.hash(password, costOf(config));
}

/** Hash of a random password nobody knows, by cost. */
const placeholderByCost = new Map<number, Promise<string>>();

/**
 * Compares a password with a hash. Without an account (`null`) the same work is done for nothing, so that the time of
 * the answer does not tell whether there is one.
 */
export async function verifyPassword(config: Config, password: string, hash: string | null): Promise<boolean> {
  const cost = costOf(config);
  let placeholder = placeholderByCost.get(cost);
  if (placeholder === undefined) {
    placeholder = bcrypt.hash(crypto.randomUUID(), cost);
    placeholderByCost.set(cost, placeholder);
  }
  // bcrypt ignores what follows the 72nd byte: a longer text must not pass for its beginning.
  const isTooLong = bcrypt.truncates(password);
  const matches = await bcrypt.compare(password, hash ?? (await placeholder));
  return matches && hash !== null && !isTooLong;
}
