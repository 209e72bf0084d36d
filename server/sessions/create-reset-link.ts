import type { Transaction } from 'sequelize';
import type { Config } from '../config/config.js';
import { passwordResetLink } from '../mail/links.js';
import { PasswordReset } from '../models/password-reset.js';
import { createSecret, hashOf } from './tokens.js';

const LIFE_MS = 3_600_000;

/** Makes a link with which a person sets a new password: good for an hour, once. Only its hash is kept. */
export async function createResetLink(
  transaction: Transaction,
  config: Config,
  userId: string,
): Promise<{ link: string; expiresAt: Date }> {
  const secret = createSecret();
  const now = new Date();
  const expiresAt = new Date(now.getTime() + LIFE_MS);
  await PasswordReset.create({ userId, tokenHash: hashOf(secret), createdAt: now, expiresAt }, { transaction });
  return { link: passwordResetLink(config, secret), expiresAt };
}
