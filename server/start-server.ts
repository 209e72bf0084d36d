import { once } from 'node:events';
import { createServer } from 'node:http';
import { pino } from 'pino';
import type { AppContext } from './app-context.js';
import { createApp } from './app.js';
import { ensureFirstAdmin } from './commands/create-first-admin.js';
import { purgeExpired } from './commands/purge-expired.js';
import { openQueue } from './compute/open-queue.js';
import { createComputePool } from './compute/pool.js';
import type { Config } from './config/config.js';
import { connectDatabase } from './database/connect.js';
import { lockDataFolder } from './database/data-folder-lock.js';
import { migrate } from './database/migrate.js';
import { startPrivateMariadb } from './database/private-mariadb.js';
import { loadDemo } from './demo/load-demo.js';
import { createMailer } from './mail/mailer.js';
import { startOutboxSender } from './mail/outbox-sender.js';
import { initModels } from './models/init-models.js';
import type { Shutdown } from './shutdown.js';

const LAST_REQUESTS_MS = 1_000;
const UPKEEP_INTERVAL_MS = 6 * 3_600_000;

export interface StartOptions {
  readonly config: Config;
  /** Receives everything that was opened, also when a later step fails. */
  readonly shutdown: Shutdown;
  /** Tells people what takes its time. */
  readonly announce: (line: string) => void;
}

export interface StartedServer {
  readonly context: AppContext;
  /** Only at the start that made this account; the password is kept nowhere. */
  readonly firstAdmin: { readonly email: string; readonly password: string } | null;
}

/** Opens one thing after another, the port last: who gets an answer gets a complete server. */
export async function startServer({ config, shutdown, announce }: StartOptions): Promise<StartedServer> {
  await requireFreePort(config);
  const logger = pino({ level: config.logLevel });
  const sequelize = connectDatabase(config.databaseUrl ?? (await openPrivateDatabase(config, shutdown, announce)));
  shutdown.add('database connections', () => sequelize.close());
  const migrations = await migrate(sequelize);
  if (migrations.length > 0) announce(`Database: ${migrations.length} schema changes made.`);
  initModels(sequelize);

  const compute = createComputePool({
    threads: config.computeThreads,
    isYielding: true,
    shardHeapMegabytes: config.shardMemoryMegabytes,
    onFault: (error) => logger.error({ err: error }, 'compute thread failed'),
  });
  shutdown.add('compute threads', () => compute.close());
  const queue = await openQueue({ config, compute, sequelize, logger, shutdown });

  const mailer = createMailer(config);
  shutdown.add('mail connection', () => mailer.close());
  const services = { config, sequelize, logger, mailer, compute, queue };
  const context: AppContext = { ...services, demoAccounts: await loadDemo(services, announce) };
  const outbox = startOutboxSender(context);
  shutdown.add('mail outbox', () => outbox.stop());
  shutdown.add('upkeep', startUpkeep(context));
  const firstAdmin = await ensureFirstAdmin(context);
  await listen(context, shutdown);
  return { context, firstAdmin };
}

/** Removes what has expired, now and every few hours; returns what ends it. */
function startUpkeep(context: AppContext): () => Promise<void> {
  const purge = () => purgeExpired(context, new Date()).catch((error: unknown) => context.logger.error({ err: error }, 'upkeep failed'));
  let current = purge();
  const timer = setInterval(() => {
    current = purge();
  }, UPKEEP_INTERVAL_MS);
  return async () => {
    clearInterval(timer);
    await current;
  };
}

async function openPrivateDatabase(config: Config, shutdown: Shutdown, announce: (line: string) => void): Promise<string> {
  const release = await lockDataFolder(config.dataDirectory);
  shutdown.add('data folder', release);
  announce('Starting the database …');
  const database = await startPrivateMariadb(config.dataDirectory);
  shutdown.add('database', database.stop);
  return database.url;
}

/** Said at once, and not after the demo has been computed. */
async function requireFreePort({ port, host }: Config): Promise<void> {
  const probe = createServer().listen(port, host);
  await once(probe, 'listening');
  probe.close();
  await once(probe, 'close');
}

async function listen(context: AppContext, shutdown: Shutdown): Promise<void> {
  const server = createServer(createApp(context));
  server.listen(context.config.port, context.config.host);
  await once(server, 'listening');
  shutdown.add('web server', async () => {
    const closed = once(server, 'close');
    server.close();
    // Event streams would stay open for ever; requests under way get a moment to finish.
    server.closeIdleConnections();
    const lastCall = setTimeout(() => server.closeAllConnections(), LAST_REQUESTS_MS);
    await closed;
    clearTimeout(lastCall);
  });
}
