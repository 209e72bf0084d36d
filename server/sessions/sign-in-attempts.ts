import type { Sequelize, Transaction } from 'sequelize';
import { TooManyRequestsError } from '../errors.js';
import { SignInAttempt } from '../models/sign-in-attempt.js';
import { hashOf } from './tokens.js';

/** So many wrong passwords in a row lock an account. */
export const FAILURES_BEFORE_LOCK = 8;
/** For so long; failures older than that are forgotten. */
export const LOCK_MINUTES = 15;

/**
 * Counts an attempt as failed before its password is looked at, so that many at once are not checked for the price of
 * one. A success takes it back with `forgetSignInAttempts`.
 * @throws TooManyRequestsError while the address is locked
 */
export async function countSignInAttempt(sequelize: Sequelize, email: string): Promise<void> {
  const emailHash = hashOf(email);
  const now = new Date();
  await SignInAttempt.bulkCreate([{ emailHash, failures: 0, lockedUntil: null, updatedAt: now }], { ignoreDuplicates: true });
  const lockedUntil = await sequelize.transaction(async (transaction) => {
    const attempt = await SignInAttempt.findByPk(emailHash, { transaction, lock: transaction.LOCK.UPDATE });
    // A success a moment ago has taken the row away: nothing to count.
    if (attempt === null) return null;
    if (attempt.lockedUntil !== null && attempt.lockedUntil > now) return attempt.lockedUntil;
    const isForgotten = now.getTime() - attempt.updatedAt.getTime() > LOCK_MINUTES * 60_000 || attempt.lockedUntil !== null;
    const failures = isForgotten ? 1 : attempt.failures + 1;
    await attempt.update(
      { failures, lockedUntil: failures >= FAILURES_BEFORE_LOCK ? new Date(now.getTime() + LOCK_MINUTES * 60_000) : null, updatedAt: now },
      { transaction },
    );
    return null;
  });
  if (lockedUntil === null) return;
  const seconds = Math.ceil((lockedUntil.getTime() - now.getTime()) / 1000);
  throw new TooManyRequestsError(
    seconds,
    `Too many wrong passwords for this address. Try again in ${Math.ceil(seconds / 60)} minutes, or reset the password.`,
  );
}

export async function forgetSignInAttempts(email: string, transaction: Transaction): Promise<void> {
  await SignInAttempt.destroy({ where: { emailHash: hashOf(email) }, transaction });
}
