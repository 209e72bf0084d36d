import type { AppContext } from './app-context.js';
import { purgeExpired } from './commands/purge-expired.js';
import { startOutboxSender } from './mail/outbox-sender.js';

const PURGE_EVERY_MS = 3_600_000;

export interface Upkeep {
  /** Waits for what is being done; then nothing touches the database any more. */
  stop(): Promise<void>;
}

/** What a running server does by itself beside answering requests: sends mails, and tidies up at start and every hour. */
export function startUpkeep(context: AppContext): Upkeep {
  const outbox = startOutboxSender(context);
  const purge = (): Promise<void> =>
    purgeExpired(context, new Date()).catch((error: unknown) => {
      context.logger.error({ err: error }, 'tidying up failed');
    });
  let current = purge();
  const timer = setInterval(() => {
    current = current.then(purge);
  }, PURGE_EVERY_MS);
  return {
    stop: async () => {
      clearInterval(timer);
      await Promise.all([outbox.stop(), current]);
    },
  };
}
