import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { QuotaRole } from '../shared/types/roles.js';
import type { ComputeService } from './compute/compute-service.js';
import type { RunQueue } from './compute/queue.js';
import type { Config } from './config/config.js';

export interface MailMessage {
  readonly to: string;
  readonly subject: string;
  readonly text: string;
}

/** Delivers one message; rejects when the other side did not take it. */
export interface Mailer {
  send(message: MailMessage): Promise<void>;
  close(): void;
}

/** Shown to everybody who can reach the sign-in page: only for invented data. */
export interface DemoAccount {
  readonly email: string;
  readonly name: string;
  readonly role: QuotaRole;
  readonly password: string;
}

/** Everything the app is built on: made once at start, replaced piece by piece in tests. */
export interface AppContext {
  readonly config: Config;
  /** Models are bound to it (initModels). */
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  readonly mailer: Mailer;
  /** Absent in tests that need no engine. */
  readonly compute?: ComputeService;
  /** Absent in tests that start no runs. */
  readonly queue?: RunQueue;
  /** Accounts of the invented laboratory that the sign-in page offers; absent without the demo. */
  readonly demoAccounts?: readonly DemoAccount[];
}
