import type { Transaction } from 'sequelize';
import { Session, type SessionEndReason } from '../models/session.js';

/** Ends every open session of a person. */
export async function endSessionsOf(transaction: Transaction, userId: string, reason: SessionEndReason): Promise<void> {
  await Session.update({ endedAt: new Date(), endReason: reason }, { where: { userId, endedAt: null }, transaction });
}
